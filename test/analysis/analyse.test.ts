import { describe, expect, it } from 'vitest';
import { analyse } from '../../src/analysis/analyse.js';
import type { Finding } from '../../src/analysis/finding.js';
import { findingNames } from '../../src/analysis/finding-names.js';
import fc from '../property.js';
import { evenly, evidenceOf, headerOf, type Point, ramp, type Sample, type Step } from './evidence-of.js';

/** What any sound list of findings is, whatever the readings were. */
function expectSound(findings: readonly Finding[]): void {
  const names = findings.map(({ name }) => name);
  expect(new Set(names).size).toBe(names.length);
  for (const { name, value, interval, standardUncertainty } of findings) {
    expect(Object.keys(findingNames)).toContain(name);
    if (typeof value === 'number') expect(value, name).not.toBeNaN();
    if (standardUncertainty !== null) expect(standardUncertainty, name).toBeGreaterThanOrEqual(0);
    if (interval === null) continue;
    expect(interval[0], name).toBeLessThanOrEqual(Number(value));
    expect(interval[1], name).toBeGreaterThanOrEqual(Number(value));
  }
}

describe('a record that holds little', () => {
  const point: Point = { set: 1, samples: [{ meter: 15.2, load: 15.1, current: 1 }] };
  const unread: Point = { set: 1, samples: [{ meter: null, load: null, current: null }] };

  it.each<[string, readonly Step[], readonly string[]]>([
    ['no steps', [], []],
    [
      'steps without points',
      [{ kind: 'open-circuit' }, { kind: 'load-ramp' }, { kind: 'dropout-search' }],
      [],
    ],
    ['a point without readings', [{ kind: 'load-ramp', points: [{ set: 1, samples: [] }] }], []],
    ['readings of which none is a number', [{ kind: 'load-ramp', points: [unread, unread, unread] }], []],
    ['one point', [{ kind: 'load-ramp', points: [point] }], ['usable-current', 'recommended-current']],
    [
      'two points',
      [{ kind: 'load-ramp', points: [point, point] }],
      ['usable-current', 'recommended-current'],
    ],
    [
      'a step of a kind that is not known yet',
      [{ kind: 'soak', points: [point] }],
      ['usable-current', 'recommended-current'],
    ],
    [
      'an overload of which nothing was read',
      [
        { kind: 'load-ramp', points: ramp(evenly(0, 4, 5), () => 15) },
        {
          kind: 'dropout-search',
          points: [
            { set: 5, phase: 'start', outcome: 'dropped', samples: [] },
            {
              set: 5,
              phase: 'overload',
              outcome: 'measured',
              samples: [...unread.samples, ...unread.samples, ...unread.samples],
            },
          ],
        },
      ],
      [
        'usable-current',
        'recommended-current',
        'open-circuit-voltage',
        'droop-resistance',
        'load-regulation',
        'dropout-current',
        'lead-resistance',
      ],
    ],
  ])('%s: gives what there is', (_, steps, names) => {
    const findings = analyse(evidenceOf(steps));
    expect(findings.map(({ name }) => name)).toEqual(names);
    expectSound(findings);
  });
});

describe('any record at all', () => {
  // No instrument has more than nine decimals.
  const decimals = fc.double({ min: -60, max: 60, noNaN: true }).map((value) => Number(value.toFixed(9)));
  const reading = fc.oneof(
    { weight: 8, arbitrary: decimals },
    { weight: 4, arbitrary: fc.constantFrom(0, 15, 15.2, 4) },
    { weight: 1, arbitrary: fc.constantFrom(null, Number.NaN, Number.POSITIVE_INFINITY, 9.91e37, 1e-9) },
  );
  const sample: fc.Arbitrary<Sample> = fc.record({ meter: reading, load: reading, current: reading });
  const point: fc.Arbitrary<Point> = fc.record({
    set: fc.oneof(decimals.map(Math.abs), fc.constantFrom(0, 4, 5)),
    phase: fc.constantFrom(
      'idle',
      'ramp',
      'start',
      'climb',
      'halve',
      'return',
      'steadiness',
      'overload',
      'recovery',
    ),
    outcome: fc.constantFrom('held', 'held', 'held', 'dropped', 'measured', null),
    samples: fc.array(sample, { maxLength: 5 }),
  });
  const step: fc.Arbitrary<Step> = fc.record({
    kind: fc.constantFrom('open-circuit', 'load-ramp', 'dropout-search'),
    points: fc.array(point, { maxLength: 12 }),
    recoveries: fc.array(
      fc.tuple(
        fc.constantFrom('came-back' as const, 'stayed-off' as const, 'came-back-after-cycling' as const),
        fc.double({ min: 0, max: 10, noNaN: true }),
        fc.double({ min: 0, max: 10, noNaN: true }),
      ),
      { maxLength: 2 },
    ),
  });

  it('is analysed without an error, into sound findings', () => {
    fc.assert(
      fc.property(
        fc.array(step, { maxLength: 4 }),
        fc.constantFrom('meter-at-module' as const, 'load-terminals' as const),
        (steps, voltageFrom) => {
          expectSound(analyse(evidenceOf(steps, headerOf({ voltageFrom }))));
        },
      ),
      { numRuns: 1000 },
    );
  });

  it('gives the same findings each time it is analysed', () => {
    fc.assert(
      fc.property(fc.array(step, { maxLength: 3 }), (steps) => {
        const evidence = evidenceOf(steps);
        expect(analyse(evidence)).toEqual(analyse(evidence));
      }),
      { numRuns: 100 },
    );
  });
});
