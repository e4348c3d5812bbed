import { describe, expect, it } from 'vitest';
import type { AnyBuild } from '../../../src/report/build/any-build.js';
import { buildAsJson } from '../../../src/report/build/build-json.js';
import { jsonText } from '../../../src/report/json-text.js';
import { madeProfile } from '../../arrangement/made-profile.js';
import { buildParallel } from '../../../src/arrangement/build-parallel.js';
import {
  bricks,
  chosen,
  pair,
  staged,
  stagedThatShorts,
  string,
  stringUnproved,
  stringWithBonded,
} from './made-builds.js';

type Json = null | boolean | number | string | readonly Json[] | { readonly [key: string]: Json };

function read(build: AnyBuild): { readonly [key: string]: Json } {
  return JSON.parse(jsonText(buildAsJson(build))) as { readonly [key: string]: Json };
}

const [group, stages, shorting] = [pair(), staged(), stagedThatShorts()] as const;

const builds: readonly (readonly [string, AnyBuild])[] = [
  ['a group', group],
  ['a refused stack', stringWithBonded()],
  ['a stack', string()],
  ['a selection', chosen()],
  ['a selection out of too few', chosen({ supplies: 5 })],
  ['a staged supply', stages],
  ['a staged supply that shorts a module', shorting],
];

describe('the JSON of what may be built', () => {
  it.each(builds)('of %s has a unit of UCUM beside every value', (_, build) => {
    const bare = valuesOf(read(build)).filter(
      ({ value, unit }) => (typeof value === 'number' || Array.isArray(value)) && !units.has(unit),
    );
    expect(bare).toEqual([]);
    expect(valuesOf(read(build)).length).toBeGreaterThan(20);
  });

  it.each(builds)('of %s holds no number that JSON does not know', (_, build) => {
    const isOdd = (value: unknown): boolean =>
      (typeof value === 'number' && !Number.isFinite(value)) ||
      (typeof value === 'object' && value !== null && Object.values(value).some(isOdd));
    expect(isOdd(buildAsJson(build))).toBe(false);
  });

  it('says of each number of a module which record it was taken from', () => {
    const [module] = read(group)['modules'] as readonly Json[];
    const from = {
      record: '20261130T091500Z-K1-real-limit',
      procedure: 'real-limit',
      began: '2026-11-30T09:15:00.000Z',
      state: 'whole',
      simulated: false,
    };
    expect(module).toMatchObject({
      name: 'K1',
      openCircuitVoltage: { value: 15.21, unit: 'V', coverage: 0.95, from },
      droopResistance: { value: 0.018, unit: 'Ohm', from },
      usableCurrent: { unit: 'A', from },
      recommendedCurrent: { value: 4, unit: 'A', from },
      limitStyle: { value: 'hiccup', unit: null, from },
      earthRelation: { value: 'isolated', from: { procedure: 'isolation' } },
      shortCircuitCurrent: null,
    });
  });

  it('gives a group its shares, its curves and its ballast, ratios in %', () => {
    const json = read(pair({ load: 6 }));
    expect(json).toMatchObject({
      format: 'railproof/combination 1',
      arrangement: 'parallel',
      outcome: 'may-be-built',
      standing: { kind: 'may-be-built', because: [] },
      load: { value: 6, unit: 'A', from: 'asked-for' },
      wish: { ballast: { value: 0.051, unit: 'Ohm' }, imbalance: null, tolerance: { value: 5, unit: '%' } },
      ballast: { kind: 'resistor', resistance: { value: 0.051, unit: 'Ohm' } },
      circuit: {
        form: {
          kind: 'group',
          of: [
            { kind: 'module', name: 'K1' },
            { kind: 'module', name: 'K2' },
          ],
        },
      },
    });
    const { shares } = json['sharing'] as { shares: readonly { value: number }[] };
    expect(shares.reduce((sum, { value }) => sum + value, 0)).toBeCloseTo(100, 6);
    const curves = json['curves'] as { load: { values: number[] }; currents: { best: number[] }[] };
    for (const { best } of curves.currents) expect(best).toHaveLength(curves.load.values.length);
  });

  it('gives a stack its rails and diodes, and a refused one no parts', () => {
    expect(read(string())).toMatchObject({
      format: 'railproof/combination 1',
      arrangement: 'series',
      rails: [{ module: 'K1' }, { module: 'K2' }, { module: 'K3' }],
      reverseDiodes: [{ current: { unit: 'A' } }, {}, {}],
      beyondTouchable: false,
    });
    expect(read(stringWithBonded())).toMatchObject({ outcome: 'must-not-be-built', parts: [] });
    expect(read(stringUnproved())).toMatchObject({ outcome: 'cannot-tell' });
  });

  it('gives a selection its best and its next, and null where there is none', () => {
    expect(read(chosen())).toMatchObject({
      format: 'railproof/selection 1',
      wish: { group: 2, stack: 1, supplies: 1, imbalance: { value: 10, unit: '%' } },
      best: { recommended: { unit: 'A' }, supplies: [{ groups: [{ imbalance: { unit: '%' } }] }] },
    });
    expect(read(chosen({ supplies: 5 }))).toMatchObject({ best: null, next: null, circuit: null });
  });

  it('gives a staged supply its switch-overs, what it guarantees, and its heat', () => {
    const json = read(stages);
    expect(json).toMatchObject({
      format: 'railproof/staged-supply 1',
      name: 'valve-bench',
      outcome: 'may-be-built',
      sequence: 'any-order',
      linearStage: { most: { value: 25, unit: 'W' } },
      arrangements: [{ name: 'pair' }, { name: 'two' }, { name: 'three' }],
      switchOvers: [
        {
          lower: 'pair',
          upper: 'two',
          goingUp: { verdicts: [{ sequence: 'any-order', kind: 'clear' }, {}, {}] },
        },
        { lower: 'two', upper: 'three' },
      ],
    });
    const { output, current, watts } = json['dissipation'] as {
      output: { values: number[] };
      current: { values: number[] };
      watts: (number | null)[][];
    };
    expect(watts).toHaveLength(output.values.length);
    for (const row of watts) expect(row).toHaveLength(current.values.length);
    expect(Math.max(...watts.flat().map((each) => each ?? 0))).toBeLessThanOrEqual(25 + 1e-6);
    expect(read(shorting)).toMatchObject({ outcome: 'must-not-be-built', parts: [] });
  });

  it('gives null for an interval without an end', () => {
    const { usable } = madeProfile('K1');
    const endless = madeProfile('K1');
    const build = buildParallel(
      [
        { ...endless, usable: { ...usable, bound: 'least', interval: [5, Number.POSITIVE_INFINITY] } },
        bricks.K2,
      ],
      { ballast: { kind: 'given', resistance: 0.051 }, tolerance: 0.05, load: 6 },
    );
    const [module] = read(build)['modules'] as readonly Json[];
    expect(module).toMatchObject({ usableCurrent: { bound: 'least', interval: null, coverage: null } });
  });
});

const units = new Set<unknown>(['V', 'A', 'Ohm', 'W', '%', 'Cel', 's', 'K']);

/** Every object that has a value, or a list of values, wherever it stands. */
function valuesOf(json: Json): { readonly value: unknown; readonly unit: unknown }[] {
  if (json === null || typeof json !== 'object') return [];
  const within = Object.values(json).flatMap(valuesOf);
  if (Array.isArray(json)) return within;
  const { value, values, unit } = json as { value?: Json; values?: Json; unit?: Json };
  return value === undefined && values === undefined ? within : [{ value: value ?? values, unit }, ...within];
}
