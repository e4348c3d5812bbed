import { describe, expect, it } from 'vitest';
import type { Interpreter } from '../../../src/simulation/dialects/dialect.js';
import { routedScanner } from '../../../src/simulation/dialects/routed-scanner.js';
import { channelList, channelListText } from '../../../src/simulation/dialects/scpi-channel-list.js';
import { Relays } from '../../../src/simulation/relays.js';
import fc from '../../property.js';

function awake(): Interpreter {
  if (routedScanner.role !== 'scanner') throw new Error('not a scanner');
  const relays = new Relays({ from: Number.POSITIVE_INFINITY, noticed: true });
  return routedScanner.wake({
    identity: 'railproof,simulated scanner,K-bench,1',
    closed: () => relays.said,
    close: (channels) => {
      relays.close(channels, 0);
    },
    open: (channels) => {
      relays.open(channels, 0);
    },
  });
}

describe('a scanner of the ROUTe subsystem', () => {
  it('closes and opens channels, and says which are closed', () => {
    const scanner = awake();
    expect(scanner.hear('ROUT:CLOS:STAT?').reply).toBe('(@)');
    expect(scanner.hear('ROUT:CLOS (@101)')).toEqual({ reply: undefined, understood: true });
    expect(scanner.hear('ROUTE:CLOSE (@104,102)').understood).toBe(true);
    expect(scanner.hear('rout:clos:state?').reply).toBe('(@101,102,104)');
    expect(scanner.hear('ROUT:CLOS? (@101:104)').reply).toBe('1,1,0,1');
    expect(scanner.hear('ROUT:OPEN (@102)').understood).toBe(true);
    expect(scanner.hear('ROUT:OPEN? (@101,102)').reply).toBe('0,1');
    expect(scanner.hear('ROUT:OPEN:ALL;:ROUT:CLOS:STAT?').reply).toBe('(@)');
  });

  it('opens all on *RST', () => {
    const scanner = awake();
    scanner.hear('ROUT:CLOS (@101)');
    expect(scanner.hear('*RST;:ROUT:CLOS:STAT?').reply).toBe('(@)');
  });

  it.each([
    ['ROUT:CLOS', '-109,"Missing parameter"'],
    ['ROUT:CLOS 101', '-104,"Data type error"'],
    ['ROUT:CLOS (@1O1)', '-104,"Data type error"'],
    ['ROUT:CLOS (@101,)', '-104,"Data type error"'],
    ['ROUT:CLOS (@0)', '-222,"Data out of range"'],
    ['ROUT:CLOS (@104:101)', '-222,"Data out of range"'],
    ['ROUT:CLOS (@1:9999)', '-222,"Data out of range"'],
    ['ROUT:SHUT (@101)', '-113,"Undefined header"'],
  ])('refuses %s, moving nothing', (message, complaint) => {
    const scanner = awake();
    expect(scanner.hear(message).understood).toBe(false);
    expect(scanner.hear('SYST:ERR?').reply).toBe(complaint);
    expect(scanner.hear('ROUT:CLOS:STAT?').reply).toBe('(@)');
  });
});

describe('a channel list', () => {
  it('comes back as it was written', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 1, max: 9999 }), { maxLength: 20 }), (channels) => {
        expect(channelList(channelListText(channels))).toEqual({ channels });
      }),
    );
  });

  it('never makes more than a rack has, whatever is written', () => {
    fc.assert(
      fc.property(fc.stringMatching(/^\(@[0-9:, ]{0,40}\)$/), (text) => {
        const read = channelList(text);
        if ('error' in read) expect(read.error).toBeLessThan(0);
        else expect(read.channels.length).toBeLessThan(21_000);
      }),
    );
  });
});
