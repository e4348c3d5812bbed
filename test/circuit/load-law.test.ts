import { describe, expect, it } from 'vitest';
import { type LoadLaw, currentDrawn, needOf, saturationVoltage } from '../../src/circuit/load-law.js';

const sinking: LoadLaw = { kind: 'current', current: 4, leastVoltage: 1, leads: 0.05 };

describe('a load law', () => {
  it.each<[string, LoadLaw, number, number]>([
    ['an input that is off draws nothing', { kind: 'open' }, 15, 0],
    ['a constant-current load sinks its set current', sinking, 12, 4],
    ['… down to its least voltage and the loss in the leads', sinking, 1.2, 4],
    ['… and below it the share it still can', sinking, 0.6, 2],
    ['… and nothing from 0 V', sinking, 0, 0],
    ['a set current of nothing draws nothing', { ...sinking, current: 0 }, 15, 0],
    [
      'a load without a least voltage and leads sinks from anything',
      { ...sinking, leastVoltage: 0, leads: 0 },
      0,
      4,
    ],
    [
      'a constant-voltage load below its voltage draws nothing',
      { kind: 'voltage', voltage: 10, leads: 0.05 },
      9,
      0,
    ],
    ['… and above it what the leads let through', { kind: 'voltage', voltage: 10, leads: 0.05 }, 10.1, 2],
    ['… and without leads anything at all', { kind: 'voltage', voltage: 10, leads: 0 }, 10.1, Infinity],
    [
      'a resistor takes its share through the leads',
      { kind: 'resistance', resistance: 2.9, leads: 0.1 },
      12,
      4,
    ],
    [
      '… and without any resistance anything at all',
      { kind: 'resistance', resistance: 0, leads: 0 },
      1,
      Infinity,
    ],
  ])('%s', (_, law, voltage, current) => {
    expect(currentDrawn(law, voltage)).toBeCloseTo(current, 12);
  });

  it.each<[string, LoadLaw, number, number, number]>([
    ['an input that is off passes nothing', { kind: 'open' }, 0, 0, 0],
    ['a constant-current load passes no more than its set current', sinking, 2, 0.6, 4],
    [
      'a constant-voltage load needs its voltage and the loss in the leads',
      { kind: 'voltage', voltage: 10, leads: 0.05 },
      2,
      10.1,
      Infinity,
    ],
    ['a resistor needs its voltage', { kind: 'resistance', resistance: 2.9, leads: 0.1 }, 2, 6, Infinity],
  ])('%s', (_, law, current, voltage, most) => {
    const need = needOf(law);
    expect(need.atZero + need.slope * current).toBeCloseTo(voltage, 12);
    expect(need.most).toBe(most);
  });

  it('counts the leads into the voltage at which the load saturates', () => {
    expect(saturationVoltage(sinking)).toBeCloseTo(1.2, 12);
  });
});
