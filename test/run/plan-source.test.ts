import { describe, expect, it } from 'vitest';
import type { SourcePlace } from '../../src/files/bench.js';
import type { Driver } from '../../src/files/driver.js';
import type { Module } from '../../src/files/module.js';
import { makePlan, type Plan } from '../../src/run/plan.js';
import { sourceProblems } from '../../src/run/plan-source.js';
import { underTestOf } from '../../src/run/plan-circuit.js';
import { stepKinds } from '../../src/steps/index.js';
import { nursery } from '../bench/nursery-bench.js';
import { k1, k7 } from '../steps/one-step.js';
import { procedureOf } from './rehearsal.js';

const { description, drivers } = await nursery({ file: 'nursery-source' });
const { source } = description.instruments;
const driver = drivers.source;
if (source === undefined || driver === undefined) throw new Error('there is no source on this bench');

function problemsOf(
  change: Partial<SourcePlace>,
  speaking: Partial<Driver> = {},
  circuit: 'single' | 'parallel' | 'series' = 'single',
  modules: readonly [Module, ...Module[]] = [k7],
): readonly string[] {
  return [
    ...sourceProblems(
      underTestOf(circuit, modules),
      {
        ...description,
        instruments: { ...description.instruments, source: { ...source, ...change } as SourcePlace },
      },
      { ...drivers, source: { ...driver, ...speaking } as Driver },
    ),
  ];
}

function planFor(module: Module, file: string, step = 'open-circuit: { for: 1 s }'): Promise<Plan> {
  return nursery({ file }).then((bench) =>
    makePlan(procedureOf([step]), [module], bench.description, bench.drivers, stepKinds),
  );
}

describe('a source on the bench', () => {
  it('is for modules that are fed with dc', async () => {
    await expect(planFor(k7, 'nursery-source')).resolves.toBeDefined();
    await expect(planFor({ ...k1, name: 'K1' }, 'nursery-source')).rejects.toMatchObject({
      code: 'PLAN',
      exitCode: 65,
      problems: [
        expect.stringMatching(
          /^instruments\.source: would feed nothing: K1 is fed from the mains; take the source out/,
        ) as string,
      ],
    });
  });

  it('is not needed: a dc module without one is fed by hand', async () => {
    await expect(planFor({ ...k7, rated: k1.rated }, 'nursery')).resolves.toBeDefined();
  });

  it('fits when it gives what is asked of it', () => {
    expect(problemsOf({})).toEqual([]);
    expect(problemsOf({ voltage: 60, current: 5 })).toEqual([]);
  });

  it.each<[Partial<SourcePlace>, RegExp]>([
    [
      { voltage: 61 },
      /^instruments\.source\.voltage: 61 V is more than source-output-scpi is rated for \(60 V\)$/,
    ],
    [
      { current: 11 },
      /^instruments\.source\.current: 11 A is more than source-output-scpi is rated for \(10 A\)$/,
    ],
    [
      { voltage: 48, current: 9 },
      /^instruments\.source: 48 V, 9 A at most, is 432\.0 W, more than .* \(300 W\)$/,
    ],
  ])('that is asked for %j is refused', (change, words) => {
    expect(problemsOf(change)).toEqual([expect.stringMatching(words) as string]);
  });

  it("gives more than is ever asked of the module, else its own limit would be taken for the module's", async () => {
    await expect(planFor(k7, 'nursery-source', 'dropout-search: { ceiling: 6 A }')).resolves.toBeDefined();
    await expect(planFor(k7, 'nursery-source', 'dropout-search: { ceiling: 6.5 A }')).rejects.toThrow(
      'dropout-search.ceiling: 6.5 A at 15 V and 3 % is 100.4 W, more than the source allows (96 W)',
    );
  });

  it('whose driver promises no ratings is not held to any', () => {
    expect(problemsOf({ voltage: 400, current: 100 }, { ratings: {} })).toEqual([]);
  });

  it('must be told its voltage and its current', () => {
    expect(problemsOf({}, { operations: {} })).toEqual([
      'instruments.source: the driver source-output-scpi does not say how to do set-voltage',
      'instruments.source: the driver source-output-scpi does not say how to do set-current',
    ]);
  });

  it('feeds a group, but not a stack, whose inputs it would tie together', () => {
    const two = [k7, { ...k7, name: 'K8' }] as const;
    expect(problemsOf({ current: 6 }, {}, 'parallel', two)).toEqual([]);
    expect(problemsOf({ current: 6 }, {}, 'series', two)).toEqual([
      expect.stringMatching(/^instruments\.source: would tie the inputs of a stack together/) as string,
    ]);
    expect(problemsOf({ current: 6 }, {}, 'parallel', [k7, k1])).toContainEqual(
      expect.stringMatching(/would feed nothing: K1 is fed from the mains/),
    );
  });
});
