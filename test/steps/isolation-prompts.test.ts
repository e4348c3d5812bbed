import { describe, expect, it } from 'vitest';
import * as ask from '../../src/steps/isolation-prompts.js';
import { k1 } from './one-step.js';

const classTwo = { ...k1, name: 'W1', protectionClass: 'II' } as const;
const dc = { ...k1, name: 'D1', input: 'dc' } as const;

describe('what is asked of the person who checks the isolation', () => {
  it('begins with the plug, and frees the output only when it has been shown to be discharged', () => {
    expect(ask.unplug([k1]).text).toBe(
      'Pull the plug of K1 out of its socket and leave it out. The pins may hold a charge for some seconds: do not touch them. Touch nothing at the output either, until the meter has shown that it is discharged.',
    );
    const three = [k1, { ...k1, name: 'K2' }, { ...k1, name: 'K3' }] as const;
    expect(ask.unplug(three).text).toMatch(
      /^Pull the plugs of K1, K2 and K3 out of their sockets and leave them out\. /,
    );
    expect(ask.leadsTogether('before', [k1]).text).toMatch(
      /^The output is discharged: take its leads off the load /,
    );
    expect(ask.leadsTogether('before', three).text).toContain('so that none touches another');
    expect(ask.leadsTogether('after', three).text).toMatch(/^Take the meter's leads off /);
    expect(ask.unplug([dc]).text).toMatch(/^Take the input leads of D1 off their source /);
    expect(ask.unplug([k1, dc]).text).toMatch(/^Pull the plugs, or take off the input leads, of K1 and D1 /);
  });

  it.each([
    [k1, 'The plug of K1 is out of the socket and stays out.', 'on the earth pin of its plug,'],
    [
      classTwo,
      'The plug of W1 is out of the socket and stays out.',
      'on both pins of its plug, joined with any bare metal',
    ],
    [dc, 'The input of D1 is off its source and stays out.', 'on its earth terminal,'],
  ] as const)('touches earth only where the plug is out', (module, first, where) => {
    const { text } = ask.probeEarth(module, true);
    expect(text.startsWith(first)).toBe(true);
    expect(text).toContain(where);
    expect(text.includes('clip leads')).toBe(module.protectionClass === 'II');
  });

  it('names the module in the act where there are several', () => {
    expect(ask.probeEarth(k1, true).act).toBe('probe earth and 0 V');
    expect(ask.probeEarth(k1, false).act).toBe('probe earth and 0 V of K1');
  });

  it('wires all up again before the plug', () => {
    expect(ask.probesBack.text).toMatch(/^Everything still unplugged: /);
    expect(ask.plugIn([k1]).text).toBe('Plug K1 in again.');
    expect(ask.plugIn([dc]).text).toBe('Give D1 its input again.');
  });
});
