import { describe, expect, it } from 'vitest';
import { type LoadLaw, currentDrawn, needOf } from '../../src/circuit/load-law.js';
import type { ModuleCurve } from '../../src/circuit/module-curve.js';
import { operatingPoints } from '../../src/circuit/operating-point.js';
import { railVoltages } from '../../src/circuit/rail-voltages.js';
import { type Link, type StringPoint, stringPoint } from '../../src/circuit/series-string.js';
import { type ShockleyDiode, forwardVoltage } from '../../src/circuit/shockley-diode.js';
import fc from '../property.js';
import { amount, curvesWith, foldbacks, laws, steadyLimits } from './any-circuit.js';

const brick: ModuleCurve = {
  openCircuitVoltage: 12,
  droopResistance: 0.05,
  limit: { style: 'constant-current', current: 5 },
};
const weak: ModuleCurve = { ...brick, limit: { style: 'constant-current', current: 2 } };
const folding: ModuleCurve = { ...brick, limit: { style: 'foldback', current: 4, shortCircuit: 1 } };
const diode: ShockleyDiode = { saturationCurrent: 1e-9, idealityFactor: 1.5, temperature: 300 };
const link = (curve: ModuleCurve, more: Omit<Link, 'source'> = {}): Link => ({
  source: { kind: 'module', curve },
  ...more,
});
const off = (outputResistance: number, more: Omit<Link, 'source'> = {}): Link => ({
  source: { kind: 'off', outputResistance },
  ...more,
});
const sinks = (current: number): LoadLaw => ({ kind: 'current', current, leastVoltage: 1, leads: 0.05 });
const holds = (voltage: number, leads = 0): LoadLaw => ({ kind: 'voltage', voltage, leads });
const voltagesOf = (point: StringPoint): readonly number[] => point.links.map(({ voltage }) => voltage);

const railsOf = (links: readonly Link[], point: StringPoint): readonly number[] =>
  railVoltages(
    links.map(
      ({ resistance = 0 }, index) => (point.links[index]?.voltage ?? NaN) - resistance * point.current,
    ),
  );

function expectClose(found: readonly number[], expected: readonly number[]): void {
  expect(found).toHaveLength(expected.length);
  for (const [index, value] of expected.entries()) expect(found[index]).toBeCloseTo(value, 9);
}

describe('a series string', () => {
  it('of two alike that would fold back at once lets the lowest do so', () => {
    // 12 − 0.05·I of the one that stands and 11.8·(I − 1)/3 of the one that folds make 15 V.
    const current = (15 - 12 + 11.8 / 3) / (11.8 / 3 - 0.05);
    const point = stringPoint([link(folding), link(folding)], holds(15));
    expect(point.current).toBeCloseTo(current, 9);
    expectClose(voltagesOf(point), [(11.8 * (current - 1)) / 3, 12 - 0.05 * current]);
  });

  // Worked by hand from V = 12 − 0.05·I and the limits of 5 A and 2 A.
  it.each<[string, readonly Link[], LoadLaw, number, readonly number[]]>([
    ['adds up its modules', [link(brick), link(brick)], sinks(3), 3, [11.85, 11.85]],
    ['stands at the sum when nothing is drawn', [link(brick), link(weak)], { kind: 'open' }, 0, [12, 12]],
    ['carries what its weakest link can hold', [link(brick), link(weak)], sinks(2), 2, [11.9, 11.9]],
    [
      'drives its weakest link backwards where nothing lies across it',
      [link(brick), link(weak), link(brick)],
      sinks(3),
      2,
      // The load saturates at 1.15 V for 3 A, and takes 2 A at two thirds of that.
      [11.9, 1.15 * (2 / 3) - 23.8, 11.9],
    ],
    [
      'lets its weakest link give way to a held voltage',
      [link(brick), link(weak)],
      holds(15),
      2,
      [11.9, 3.1],
    ],
    ['lets equal links give way together', [link(weak), link(weak)], holds(15), 2, [7.5, 7.5]],
    [
      'loses its diode’s drop where a module is open behind one',
      [link(brick), off(Infinity, { diode })],
      sinks(3),
      3,
      [11.85, -forwardVoltage(diode, 3)],
    ],
    [
      'loses its diode’s drop for what the weakest link cannot carry',
      [link(brick), link(weak, { diode })],
      sinks(3),
      3,
      [11.85, -forwardVoltage(diode, 1)],
    ],
    ['goes through an output resistance', [link(brick), off(2)], sinks(3), 3, [11.85, -6]],
    ['goes straight through a shorted module', [link(brick), off(0, { diode })], sinks(3), 3, [11.85, 0]],
    [
      'loses what its series resistances take',
      [link(brick, { resistance: 0.5 }), link(brick, { resistance: 0.25 })],
      { kind: 'resistance', resistance: 7, leads: 0.15 },
      3,
      [11.85, 11.85],
    ],
    ['gives nothing below a held voltage', [link(brick), link(brick)], holds(30), 0, [12, 12]],
    ['gives its limit into a dead short', [link(brick), link(brick)], holds(0), 5, [0, 0]],
    [
      'runs along the hyperbola of a constant-power link',
      [link(brick), link({ ...brick, limit: { style: 'constant-power', current: 2 } })],
      sinks(4),
      4,
      [11.8, 23.8 / 4],
    ],
    [
      'runs down the slope beyond a limit',
      [link(brick), link({ ...brick, limit: { style: 'constant-current', current: 2, slope: 5 } })],
      sinks(3),
      3,
      [11.85, 6.9],
    ],
    [
      'leaves a folded link at its short-circuit current, backwards',
      [link(brick), link(folding)],
      sinks(4.5),
      1,
      [11.95, 1.225 / 4.5 - 11.95],
    ],
    [
      'passes the rest by the diode of a folded link',
      [link(brick), link(folding, { diode })],
      sinks(4.5),
      4.5,
      [11.775, -forwardVoltage(diode, 3.5)],
    ],
    [
      'rests on the fold where a voltage is held',
      [link(brick), link(folding, { diode })],
      // Halfway down the fold: 5.9 V at 2.5 A, the other at 11.875 V.
      holds(17.775),
      2.5,
      [11.875, 5.9],
    ],
  ])('%s', (_, links, law, current, voltages) => {
    const point = stringPoint(links, law);
    expect(point.current).toBeCloseTo(current, 9);
    expectClose(voltagesOf(point), voltages);
  });

  it('lets one folding link after the other go, and the first come back where the current allows', () => {
    const deeper: ModuleCurve = { ...folding, limit: { style: 'foldback', current: 4.1, shortCircuit: 0.5 } };
    const point = stringPoint([link(folding, { diode }), link(deeper, { diode })], holds(0));
    const [first = NaN, second = NaN] = voltagesOf(point);
    // A dead short: the deeper one lies on its diode, and the other on its fold makes up for that.
    expect(first + second).toBeCloseTo(0, 12);
    expect(point.current).toBeCloseTo(1 + (3 * first) / 11.8, 9);
    expect(second).toBeCloseTo(-forwardVoltage(diode, point.current - 0.5), 9);
  });

  it('is stopped by a module that is open and has no diode, and stands across it backwards', () => {
    const point = stringPoint([link(brick), off(Infinity), link(brick)], sinks(3));
    expect(point).toEqual({
      voltage: 0,
      current: 0,
      links: [12, -24, 12].map((voltage) => ({ voltage, current: 0, diodeCurrent: 0 })),
    });
  });

  it('tells what goes through the module from what goes past it', () => {
    const point = stringPoint([link(brick), link(weak, { diode }), off(1000, { diode })], sinks(3));
    expectClose(
      point.links.map(({ current }) => current),
      [3, 2, -(point.links[2]?.voltage ?? NaN) / 1000],
    );
    expectClose(
      point.links.map(({ current, diodeCurrent }) => current + diodeCurrent),
      [3, 3, 3],
    );
  });

  it('goes on below 0 V along the regulated line of a soft module, its diode beside it', () => {
    const soft: ModuleCurve = { ...brick, openCircuitVoltage: 1, droopResistance: 1 };
    expectClose(voltagesOf(stringPoint([link(brick), link(soft)], sinks(3))), [11.85, -2]);
    const [, beside] = stringPoint([link(brick), link(soft, { diode })], sinks(3)).links;
    expect(beside?.voltage).toBeLessThan(-0.5);
    expect(beside?.current).toBeCloseTo(1 - (beside?.voltage ?? NaN), 9);
    expect(beside?.diodeCurrent).toBeCloseTo(3 - (beside?.current ?? NaN), 9);
  });

  it('has the rail of each module float at the sum of those below it', () => {
    const links = [12, 13, 14].map((openCircuitVoltage) =>
      link({ ...brick, openCircuitVoltage }, { resistance: 0.05 }),
    );
    expectClose(railsOf(links, stringPoint(links, { kind: 'open' })), [0, 12, 25]);
    expectClose(railsOf(links, stringPoint(links, sinks(2))), [0, 11.8, 24.6]);
  });

  // Common practice, no published source: three 12.34 V bricks through 50 mΩ each.
  it('of three bricks at 12.34 V reads about 36.8 V and holds 3.5 A, its uppermost rail at about 24 V', () => {
    const curve: ModuleCurve = {
      openCircuitVoltage: 12.34,
      droopResistance: 0.005,
      limit: { style: 'constant-current', current: 3.9 },
    };
    const links = [1, 2, 3].map(() => link(curve, { resistance: 0.05 }));
    const point = stringPoint(links, sinks(3.5));
    expect(point.current).toBe(3.5);
    expect(point.voltage).toBeCloseTo(36.4425, 9);
    expect(stringPoint(links, sinks(1)).voltage).toBeCloseTo(36.855, 9);
    expect(railsOf(links, point)[2]).toBeCloseTo(24.3, 1);
  });
});

const diodes: fc.Arbitrary<ShockleyDiode> = fc.record({
  saturationCurrent: fc.constantFrom(1e-14, 1e-9, 1e-6),
  idealityFactor: amount(1, 2),
  temperature: amount(260, 380),
});
const linksOf = (curves: fc.Arbitrary<ModuleCurve>): fc.Arbitrary<readonly Link[]> =>
  fc.array(
    fc
      .record({
        source: fc.oneof(
          { weight: 5, arbitrary: curves.map((curve) => ({ kind: 'module' as const, curve })) },
          {
            weight: 1,
            arbitrary: fc
              .constantFrom(0, 0.5, 1000, Infinity)
              .map((outputResistance) => ({ kind: 'off' as const, outputResistance })),
          },
        ),
        resistance: amount(0, 0.3),
        diode: fc.option(diodes, { nil: undefined }),
      })
      .map(({ diode, ...rest }): Link => (diode === undefined ? rest : { ...rest, diode })),
    { minLength: 1, maxLength: 5 },
  );

const anyLinks = linksOf(curvesWith(fc.oneof(steadyLimits, foldbacks)));
const isOpen = ({ source, diode }: Link): boolean =>
  source.kind === 'off' && source.outputResistance === Infinity && diode === undefined;

/** Whether several links would fold back at the very same current; then their order decides. */
function foldAtOnce(links: readonly Link[]): boolean {
  const limits = links.flatMap(({ source }) =>
    source.kind === 'module' && source.curve.limit.style === 'foldback' ? [source.curve.limit.current] : [],
  );
  return new Set(limits).size < limits.length;
}

/** How far a module's voltage and current lie off its own curve, in the terms in which that is less. */
function offCurve(curve: ModuleCurve, voltage: number, current: number): number {
  const { openCircuitVoltage: open, droopResistance: droop, limit } = curve;
  const knee = open - droop * limit.current;
  const distances = [current <= limit.current + 1e-9 ? Math.abs(open - droop * current - voltage) : Infinity];
  switch (limit.style) {
    case 'constant-current':
      if (voltage <= knee + 1e-9)
        distances.push(
          limit.slope === undefined
            ? Math.abs(current - limit.current)
            : Math.abs(knee - limit.slope * (current - limit.current) - voltage),
        );
      break;
    case 'constant-power':
      distances.push(Math.abs(voltage * current - knee * limit.current));
      break;
    case 'foldback':
      distances.push(
        Math.abs(
          current - limit.shortCircuit - (Math.max(0, voltage) / knee) * (limit.current - limit.shortCircuit),
        ),
      );
  }
  return Math.min(...distances);
}

describe('for any string and any load', () => {
  it('the voltages add up to what the load needs, and each module is on its own curve', () => {
    fc.assert(
      fc.property(anyLinks, laws, (links, law) => {
        fc.pre(!links.some(isOpen));
        const point = stringPoint(links, law);
        const sum = links.reduce(
          (total, { resistance = 0 }, index) =>
            total + (point.links[index]?.voltage ?? NaN) - resistance * point.current,
          0,
        );
        expect(Math.abs(sum - point.voltage)).toBeLessThan(1e-9);
        const need = needOf(law);
        if (point.current < need.most && point.current > 0) {
          expect(Math.abs(need.atZero + need.slope * point.current - point.voltage)).toBeLessThan(1e-6);
        }
        expect(Math.abs(currentDrawn(law, point.voltage) - point.current)).toBeLessThan(
          // A load that holds its voltage makes much current of little voltage.
          1e-6 + (law.kind === 'voltage' ? 1e-9 / law.leads : 0),
        );
        for (const [index, { source, diode }] of links.entries()) {
          const { voltage = NaN, current = NaN, diodeCurrent = NaN } = point.links[index] ?? {};
          expect(Math.abs(current + diodeCurrent - point.current)).toBeLessThan(1e-9);
          if (source.kind === 'module') {
            expect(offCurve(source.curve, voltage, current)).toBeLessThan(1e-6);
          } else if (source.outputResistance !== Infinity) {
            expect(Math.abs(voltage + current * source.outputResistance)).toBeLessThan(1e-6);
          }
          if (diode !== undefined && voltage < 0) {
            expect(voltage).toBeCloseTo(-forwardVoltage(diode, diodeCurrent), 6);
          }
        }
      }),
      { numRuns: 1500 },
    );
  });

  it('one link alone rests where the module does', () => {
    fc.assert(
      fc.property(curvesWith(fc.oneof(steadyLimits, foldbacks)), laws, (curve, law) => {
        const [highest] = operatingPoints(curve, law);
        const point = stringPoint([link(curve)], law);
        expect(Math.abs(point.voltage - (highest?.voltage ?? NaN))).toBeLessThan(1e-7);
        expect(Math.abs(point.current - (highest?.current ?? NaN))).toBeLessThan(1e-6 * (1 + point.current));
      }),
      { numRuns: 1000 },
    );
  });

  it('more load never raises the string', () => {
    fc.assert(
      fc.property(anyLinks, amount(0, 20), amount(0, 10), (links, load, more) => {
        const at = (current: number): number => stringPoint(links, sinks(current)).voltage;
        expect(at(load + more)).toBeLessThanOrEqual(at(load) + 1e-6);
      }),
      { numRuns: 500 },
    );
  });

  it('the order of the links changes nothing but the order of the answer, where none folds back by lot', () => {
    fc.assert(
      fc.property(anyLinks, laws, (links, law) => {
        fc.pre(!foldAtOnce(links));
        const point = stringPoint(links, law);
        const turned = stringPoint(links.toReversed(), law);
        expect(Math.abs(turned.current - point.current)).toBeLessThan(1e-7 * (1 + point.current));
        for (const [index, voltage] of voltagesOf(turned).toReversed().entries()) {
          expect(Math.abs(voltage - (point.links[index]?.voltage ?? NaN))).toBeLessThan(1e-6);
        }
      }),
      { numRuns: 500 },
    );
  });
});
