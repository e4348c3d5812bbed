import { describe, expect, it } from 'vitest';
import { driverOfChannel } from '../../src/files/driver-channel.js';
import type { Driver } from '../../src/files/driver.js';
import { parseDriver } from '../../src/files/read-driver.js';
import fc from '../property.js';

const text = `railproof: driver 1
name: load-of-four
role: load
summary: The load of these tests
wire: { send-end: "\\n", reply-end: "\\n", gap: 0 ms, timeout: 1 s }
remote: ["SYST:REM"]
identify: "*IDN?"
errors: { ask: "SYST:ERR?", clear: "^0" }
ready: { ask: "*OPC?", when: "^1$" }
channels: { select: [{ send: "INST:NSEL {channel}", rest: 20 ms }], from: 1, to: 4 }
prepare: ["*CLS"]
local: ["SYST:LOC"]
operations:
  make-safe: ["INP OFF"]
  input-on: ["INP ON,(@{channel})"]
  input-off: ["INP OFF"]
  current-mode: []
  set-current: [{ send: "CURR {amps}", until: ready }]
readings:
  voltage: { ask: ["INIT", "FETC? (@{channel})"], unit: V, ranges: [{ up-to: 20 V, select: ["VOLT:RANG 20"] }] }
  current: { ask: "MEAS:CURR?", unit: A }
  input-state: { ask: "INP?", true-when: "^1$" }
`;
const driver = parseDriver(text, 'load-of-four.yaml');
const texts = (messages: readonly { readonly text: string }[] | undefined): string[] =>
  (messages ?? []).map((message) => message.text);

describe('a driver of one channel', () => {
  const second = driverOfChannel(driver, 2);

  it('chooses it before whatever it tells or asks of it', () => {
    expect(texts(second.prepare)).toEqual(['INST:NSEL 2', '*CLS']);
    expect(texts(second.operations['make-safe'])).toEqual(['INST:NSEL 2', 'INP OFF']);
    expect(texts(second.operations['set-current'])).toEqual(['INST:NSEL 2', 'CURR {amps}']);
    expect(texts(second.readings['current']?.ask)).toEqual(['INST:NSEL 2', 'MEAS:CURR?']);
    expect(second.prepare[0]).toEqual({ text: 'INST:NSEL 2', rest: 0.02, selectsChannel: true });
  });

  it('names it in messages that hold it', () => {
    expect(texts(second.operations['input-on'])).toEqual(['INST:NSEL 2', 'INP ON,(@2)']);
    expect(texts(second.readings['voltage']?.ask)).toEqual(['INST:NSEL 2', 'INIT', 'FETC? (@2)']);
  });

  it('chooses it before a range, which is a range of that channel', () => {
    const { voltage } = second.readings;
    expect(voltage?.kind === 'number' && texts(voltage.ranges?.[0]?.select)).toEqual([
      'INST:NSEL 2',
      'VOLT:RANG 20',
    ]);
  });

  it('leaves what is of the instrument as a whole, and sends nothing where there is nothing to send', () => {
    const { remote, local, identify, errors, ready, wire } = second;
    expect({ remote, local, identify, errors, ready, wire }).toEqual({
      ...{ remote: driver.remote, local: driver.local, identify: driver.identify },
      ...{ errors: driver.errors, ready: driver.ready, wire: driver.wire },
    });
    expect(second.operations['current-mode']).toEqual([]);
    expect(second.release).toEqual([]);
    expect(second.operations['set-current']?.[1]).toMatchObject({ untilReady: true });
  });

  it('knows of no channels, and no message of it has a place for one, whichever it is', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 9999 }), (channel) => {
        const one: Driver = driverOfChannel(driver, channel);
        expect(one.channels).toBeUndefined();
        expect(JSON.stringify(one)).not.toContain('{channel}');
        expect(driverOfChannel(one, 3)).toBe(one);
      }),
    );
  });
});
