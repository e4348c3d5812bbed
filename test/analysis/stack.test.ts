import { describe, expect, it } from 'vitest';
import { analyse } from '../../src/analysis/analyse.js';
import type { Finding } from '../../src/analysis/finding.js';
import type { RunHeader } from '../../src/record/run-header.js';
import { circuitEvidence, circuitHeader, type CircuitHeader, type CircuitPoint } from './circuit-evidence.js';
import { evenly } from './evidence-of.js';

const root3 = Math.sqrt(3);
const names = ['K1', 'K2', 'K3'];

function header(rest: Partial<CircuitHeader> = {}): RunHeader {
  return circuitHeader({
    circuit: 'series',
    ballasts: { K1: [0.05, 0], K2: [0.05, 0], K3: [0.05, 0] },
    ...rest,
  });
}

/** Three of about 15 V, 20 mΩ of droop, through 50 mΩ each. */
const idle: Readonly<Record<string, number>> = { K1: 15.2, K2: 15.1, K3: 15.3 };
function stood(current: number, change: Readonly<Record<string, number>> = {}): CircuitPoint {
  const places = Object.fromEntries(
    names.map((name) => [name, change[name] ?? (idle[name] ?? 0) - 0.02 * current]),
  );
  const output = names.reduce((sum, name) => sum + (places[name] ?? 0) - 0.05 * current, 0);
  return { set: current, output, places };
}

/** With the load's input off. */
const unloaded: CircuitPoint = { phase: 'proof', output: stood(0).output, places: stood(0).places };
const climb = evenly(0, 4, 5).map((current) => stood(current));

function findingsOf(points: readonly CircuitPoint[], given = header()): Map<string, Finding> {
  return new Map(analyse(circuitEvidence(given, points)).map((finding) => [finding.name, finding]));
}

describe('a stack', () => {
  const found = findingsOf([unloaded, ...climb]);

  it('gives the sum of its modules with no load, read at its output', () => {
    expect(found.get('stack-voltage')).toMatchObject({
      value: expect.closeTo(45.6, 9) as number,
      note: 'the modules add up to 45.60 V (K1 15.20 V, K2 15.10 V, K3 15.30 V)',
    });
  });

  it('has each 0 V standing on the modules below it', () => {
    expect(names.map((name) => found.get(`float-voltage-of-${name}`)?.value)).toEqual([
      0,
      expect.closeTo(15.2, 9),
      expect.closeTo(30.3, 9),
    ]);
    expect(found.get('float-voltage-of-K1')?.note).toBe('the lowest: its 0 V is that of the string');
    expect(found.get('float-voltage-of-K3')?.note).toBe(
      'its output then stands at 45.60 V; what its output withstands to earth is unknown: find out first',
    );
  });

  it('holds at least what was tried, and none of it is weaker than the others', () => {
    expect(found.get('group-current')).toMatchObject({ value: 4, bound: 'least' });
    expect(found.get('weakest-module')).toMatchObject({
      value: 'none',
      note: 'all held up to 4.00 A; K2 sags most, by 0.53 %',
    });
  });

  it('has its voltages as uncertain as the common meter makes them together', () => {
    const meter = { voltage: { ofReading: 0.001, fixed: 0.003, resolution: 0.002 } };
    const float = findingsOf([unloaded, ...climb], header({ meter })).get('float-voltage-of-K3');
    const expected = Math.hypot(30.3 * 0.001, 2 * 0.003, Math.SQRT2 * 0.001) / root3;
    expect(float?.standardUncertainty).toBeCloseTo(expected, 9);
  });

  it('has them less uncertain where each place has a meter of its own', () => {
    const ownMeters = { voltage: { ofReading: 0.001, fixed: 0.003, resolution: 0.002 } };
    const float = findingsOf([unloaded, ...climb], header({ ownMeters })).get('float-voltage-of-K3');
    const expected = Math.hypot(15.2 * 0.001, 15.1 * 0.001, 0.003 * Math.SQRT2, 0.001 * Math.SQRT2) / root3;
    expect(float?.standardUncertainty).toBeCloseTo(expected, 9);
  });
});

describe('the voltage at which a module floats', () => {
  it('is told where it may not be touched any more', () => {
    const high = (current: number): CircuitPoint => stood(current, { K1: 25, K2: 24, K3: 25 });
    const found = findingsOf([high(0), high(1)]);
    expect(found.get('float-voltage-of-K2')?.note).not.toContain('60 V');
    expect(found.get('float-voltage-of-K3')?.note).toContain(
      'beyond 60 V DC, which is not safe to touch (ES1, IEC 62368-1)',
    );
  });

  it('is told where it is more than the output withstands', () => {
    const found = findingsOf([unloaded], header({ outputIsolation: 35 }));
    expect(found.get('float-voltage-of-K2')?.note).toContain('its output withstands 35 V to earth');
    expect(found.get('float-voltage-of-K3')?.note).toContain(
      'MORE THAN ITS OUTPUT WITHSTANDS to earth (35 V): K3 may not stand there',
    );
  });
});

describe('the weakest module of a stack', () => {
  it('is the one whose voltage collapses first', () => {
    const drop: CircuitPoint = { ...stood(4, { K2: 1.2 }), outcome: 'dropped' };
    const found = findingsOf([unloaded, ...climb.slice(0, 4), drop]);
    const how = 'collapses at 4.00 A (15.1 V fall to 1.20 V), it held 3.00 A';
    expect(found.get('weakest-module')).toMatchObject({ value: 'K2', note: `it ${how}` });
    expect(found.get('group-current')).toMatchObject({
      value: expect.closeTo(3.5, 9) as number,
      note: `K2 ${how}`,
    });
  });

  it('is the one that sags clearly more than the others, where none collapsed', () => {
    const soft = evenly(0, 4, 5).map((current) => stood(current, { K3: 15.3 - 0.3 * current }));
    expect(findingsOf(soft).get('weakest-module')).toMatchObject({
      value: 'K3',
      note: 'it sags most, by 7.8 % at 4.00 A; none dropped',
    });
  });

  it('is the other one of two, where only the one that kept its voltage was read', () => {
    const two = header({ ballasts: { K1: [0.05, 0], K2: [0.05, 0] } });
    const pass = (of: string, volts: number): readonly CircuitPoint[] =>
      [0, 2].map((set) => ({ set, of, output: 30.3 - 0.1 * set, by: 'load', places: { [of]: volts } }));
    const drop: CircuitPoint = {
      set: 4,
      of: 'K1',
      outcome: 'dropped',
      output: 1,
      by: 'load',
      places: { K1: 15.1 },
    };
    const found = findingsOf([...pass('K1', 15.2), drop, ...pass('K2', 15.1)], two);
    expect(found.get('weakest-module')).toMatchObject({ value: 'K2' });
  });

  it('is not told where nobody saw whose voltage went', () => {
    const drop: CircuitPoint = {
      set: 4,
      of: 'K1',
      outcome: 'dropped',
      output: 1,
      by: 'load',
      places: { K1: 15.1 },
    };
    expect(findingsOf([...climb.slice(0, 3), drop]).get('weakest-module')?.value).toBe('undetermined');
  });
});

describe('voltages that do not add up to the output’s', () => {
  it('are not believed: nothing that rests on them is given, and it is told by how much', () => {
    const wrong = climb.map((point) => ({ ...point, places: { ...point.places, K2: 0.05 } }));
    const meter = { voltage: { ofReading: 0.001, fixed: 0.003, resolution: 0.002 } };
    const found = findingsOf(wrong, header({ meter }));
    expect([...found.keys()].filter((name) => name.startsWith('float'))).toEqual([]);
    expect(found.get('weakest-module')).toMatchObject({
      value: 'undetermined',
      note: expect.stringMatching(
        /^the modules' voltages add up to 29\.79 V where the output gives 44\.76 V at 4\.00 A/,
      ) as string,
    });
    expect(found.get('stack-voltage')).toMatchObject({ note: '' });
  });
});
