import { describe, expect, it } from 'vitest';
import { ConnectionLostError } from '../../src/instrument/connection-errors.js';
import { ask, hiccup, k1, loadDriver, say, simulationOf, wireUp } from './bench-parts.js';

const text = (bytes: Uint8Array | undefined): string | undefined =>
  bytes === undefined ? undefined : new TextDecoder().decode(bytes);

describe('a simulated line', () => {
  it('answers after the reading time and the latency, by the clock', async () => {
    const { meter, clock } = wireUp(simulationOf(k1(hiccup)));
    await say(meter, 'READ?');
    expect(await meter.receive(0)).toBeUndefined();
    expect(clock.now()).toBe(0);
    expect(text(await meter.receive(1))).toBe('+1.521000E+01\n');
    expect(clock.now()).toBeCloseTo(0.021, 9);
  });

  it('lets the whole wait pass when nothing comes', async () => {
    const { meter, clock } = wireUp(simulationOf(k1(hiccup)));
    await say(meter, '*CLS');
    expect(await meter.receive(3)).toBeUndefined();
    expect(clock.now()).toBeCloseTo(3, 9);
  });

  it('hears a message that arrives in pieces, and several that arrive at once', async () => {
    const { load } = wireUp(simulationOf(k1(hiccup)));
    await load.write(Buffer.from('*OP'));
    await load.write(Buffer.from('C?\r\nINP?\nCURR?\n'));
    expect(text(await load.receive(1))).toBe('1\n0\n+0.000000E+00\n');
  });

  it('takes one thing after the other: two readings take twice the time', async () => {
    const { load, clock } = wireUp(simulationOf(k1(hiccup)));
    await say(load, 'MEAS:VOLT?\nMEAS:CURR?');
    await load.receive(1);
    expect(clock.now()).toBeCloseTo(0.011, 9);
    await load.receive(1);
    expect(clock.now()).toBeCloseTo(0.021, 9);
  });

  it('reads as long as the simulation says', async () => {
    const simulation = simulationOf(k1(hiccup), { instruments: { meter: { errors: {}, readingTime: 0.4 } } });
    const { meter, clock } = wireUp(simulation);
    await ask(meter, 'READ?');
    expect(clock.now()).toBeCloseTo(0.401, 9);
  });

  it('gives no more after it is closed', async () => {
    const { load } = wireUp(simulationOf(k1(hiccup)));
    await load.close();
    await load.close();
    await expect(say(load, '*IDN?')).rejects.toThrow(ConnectionLostError);
    await expect(load.receive(1)).rejects.toThrow(
      'simulated:standard-load: connection lost: it was closed here',
    );
  });

  it('can be opened again, and finds the instrument as it was left', async () => {
    const bench = wireUp(simulationOf(k1(hiccup)));
    await bench.tell('CURR 2;INP ON');
    await bench.load.close();
    const again = bench.connect('load', loadDriver);
    expect(await ask(again, 'INP?;CURR?')).toBe('1;+2.000000E+00');
  });
});

describe('a fault of an instrument', () => {
  it('silences it from its time on: it neither answers nor obeys', async () => {
    const { load, clock, world } = wireUp(
      simulationOf(k1(hiccup), { faults: [{ at: 30, what: 'load-silent' }] }),
    );
    await say(load, 'CURR 2;INP ON');
    await clock.sleep(29);
    expect(await ask(load, 'INP?')).toBe('1');
    await clock.sleep(1);
    await say(load, 'INP OFF;INP?');
    expect(await load.receive(5)).toBeUndefined();
    expect(world.load.input).toBe('on');
  });

  it('cuts its line at its time, also while somebody waits, after what had been sent', async () => {
    const { meter, clock } = wireUp(simulationOf(k1(hiccup), { faults: [{ at: 30, what: 'meter-lost' }] }));
    await clock.sleep(29.975);
    await say(meter, 'READ?\nREAD?');
    expect(text(await meter.receive(1))).toBe('+1.521000E+01\n');
    await expect(meter.receive(1)).rejects.toThrow(ConnectionLostError);
    expect(clock.now()).toBeCloseTo(30, 6);
    await expect(say(meter, 'READ?')).rejects.toThrow(ConnectionLostError);
  });

  it('that passes leaves it as it was: it can be opened again', async () => {
    const bench = wireUp(simulationOf(k1(hiccup), { faults: [{ at: 30, what: 'load-lost', for: 2 }] }));
    await bench.tell('CURR 2;INP ON');
    await bench.clock.sleep(30 - bench.clock.now());
    await expect(say(bench.load, 'INP?')).rejects.toThrow(ConnectionLostError);
    expect(() => bench.connect('load', loadDriver)).toThrow('the simulated instrument is gone');
    await bench.clock.sleep(2);
    // The old line stays lost.
    await expect(say(bench.load, 'INP?')).rejects.toThrow(ConnectionLostError);
    expect(await ask(bench.connect('load', loadDriver), 'INP?')).toBe('1');
  });

  it('that takes its power leaves it as it wakes', async () => {
    const bench = wireUp(simulationOf(k1(hiccup), { faults: [{ at: 30, what: 'load-restarted', for: 2 }] }));
    await bench.tell('CURR 2;INP ON');
    await bench.clock.sleep(32 - bench.clock.now());
    const again = bench.connect('load', loadDriver);
    expect(await ask(again, 'INP?')).toBe('0');
    expect(await ask(again, 'CURR?')).toBe('+0.000000E+00');
  });

  it('is silent for as long as it says', async () => {
    const { meter, clock } = wireUp(
      simulationOf(k1(hiccup), { faults: [{ at: 1, what: 'meter-silent', for: 2 }] }),
    );
    await clock.sleep(1);
    await say(meter, '*IDN?');
    expect(await meter.receive(1)).toBeUndefined();
    await clock.sleep(1);
    expect(await ask(meter, '*IDN?')).toBe('railproof,simulated meter,K-bench,1');
  });

  it('leaves the other instrument alone', async () => {
    const { load, clock } = wireUp(simulationOf(k1(hiccup), { faults: [{ at: 1, what: 'meter-silent' }] }));
    await clock.sleep(2);
    expect(await ask(load, '*IDN?')).toBe('railproof,simulated load,K-bench,1');
  });
});

describe('a fault of the module', () => {
  it('takes its voltage away for good', async () => {
    const { readVoltage, clock, operator } = wireUp(
      simulationOf(k1(hiccup), { faults: [{ at: 5, what: 'module-dead' }] }),
    );
    expect(await readVoltage()).toBeCloseTo(15.21, 5);
    await clock.sleep(5);
    expect(await readVoltage()).toBe(0);
    await operator.act('cycle input');
    expect(await readVoltage()).toBe(0);
  });

  it('or turns its sign', async () => {
    const { readVoltage, readCurrent, tell, clock } = wireUp(
      simulationOf(k1(hiccup), { faults: [{ at: 5, what: 'reversed' }] }),
    );
    await tell('CURR 2;INP ON');
    await clock.sleep(5);
    expect(await readVoltage()).toBeCloseTo(-15.21, 5);
    expect(await readCurrent()).toBeCloseTo(0, 9);
  });
});
