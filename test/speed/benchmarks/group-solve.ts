import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { DrawnBranch } from '../../../src/circuit/drawn-branch.js';
import type * as shareWalk from '../../../src/circuit/share-walk.js';
import type * as randomness from '../../../src/statistics/random.js';
import { built } from '../built.js';
import type { Benchmark, Figure } from '../figure.js';
import {
  type Branch,
  currentsPrinted,
  isThere,
  type Loaded,
  oneByOne,
  sweep,
  sweepRecorded,
} from '../ngspice.js';
import { median, secondsOf } from '../side-by-side.js';

const { ShareWalk } = await built<typeof shareWalk>('circuit/share-walk.js');
const { randomFrom } = await built<typeof randomness>('statistics/random.js');

const modules = 3;
const sag = 0.05;
const random = randomFrom(8);

/**
 * Where three modules side by side and their load come to rest. Once each point is another group, as in the draws
 * of a band, or wherever one group is looked at; ngspice is told its numbers and asked for its operating point. Once
 * all points are of one group under a load that climbs, where ngspice may begin at the point before. All its points
 * are worked out in one process, whose time from its start to its end is shared among them.
 */
export default (async () =>
  isThere
    ? [await everyPointAnotherGroup(2_000), await allPointsOfOneGroup(100_000)]
    : ['group-solve', 'group-sweep'].map((name) => ({
        kind: 'skipped',
        name,
        what: whatOf[name as keyof typeof whatOf],
        why: 'ngspice is not installed',
      }))) satisfies Benchmark;

const whatOf = {
  'group-solve': `a point of ${modules} modules, each another group`,
  'group-sweep': `a point of ${modules} modules, all of one group`,
};

async function everyPointAnotherGroup(count: number): Promise<Figure> {
  const groups = Array.from({ length: count }, () => randomGroup(modules));
  const own = solver(groups);
  const ours = await oftenTimed(own.solve, 101);
  const { seconds, found } = await inFolder(async (folder) => {
    const circuit = oneByOne(folder, groups);
    return { seconds: await oftenTimed(() => currentsPrinted(circuit), 3), found: currentsPrinted(circuit) };
  });
  const apart = found.map((value, index) =>
    Math.abs(
      value - (own.values[(index % (modules + 1)) * count + Math.floor(index / (modules + 1))] as number),
    ),
  );
  if (apart.length !== own.values.length) throw new Error(`ngspice told ${apart.length} numbers`);
  const growth: Record<string, number> = {};
  for (const many of [2, 3, 6, 12, 24]) {
    const { solve } = solver(Array.from({ length: count }, () => randomGroup(many)));
    growth[`microsecondsWith${many}Modules`] = ((await oftenTimed(solve, 31)) / count) * 1e6;
  }
  return figure('group-solve', { ours: ours / count, rival: seconds / count }, 'ngspice, told each group', {
    points: count,
    furthestApart: Math.max(...apart),
    ...growth,
  });
}

async function allPointsOfOneGroup(steps: number): Promise<Figure> {
  const { branches, most } = randomGroup(modules);
  const points = steps + 1;
  const loads = Float64Array.from({ length: points }, (_, index) => (most * index) / steps);
  const walk = new ShareWalk(drawn([{ branches }]), sag);
  const values = new Float64Array(points * (modules + 1));
  const ours = await oftenTimed(() => {
    walk.currentsAt(0, loads, { values, draws: 1 });
  }, 31);
  const { seconds, found } = await inFolder(async (folder) => {
    const circuit = sweep(folder, branches, steps, most / steps);
    return { seconds: await oftenTimed(() => sweepRecorded(circuit), 3), found: sweepRecorded(circuit) };
  });
  const apart = values.map((value, index) => {
    const row = Math.floor(index / (modules + 1));
    return Math.abs(value - (found[index + row + 1] as number));
  });
  const furthestApart = apart.reduce(
    (furthest, by) => Math.max(furthest, by),
    found.length - points * (modules + 2),
  );
  return figure(
    'group-sweep',
    { ours: ours / points, rival: seconds / points },
    'ngspice, sweeping the load',
    {
      points,
      furthestApart,
    },
  );
}

/** Far above what both leave of rounding and of ngspice's own tolerances, far below what anyone can measure. */
const alike = 1e-7;

function figure(
  name: keyof typeof whatOf,
  { ours, rival }: { readonly ours: number; readonly rival: number },
  what: string,
  beside: Readonly<Record<string, number>> & { readonly furthestApart: number },
): Figure {
  if (!(beside.furthestApart < alike)) throw new Error(`both are ${beside.furthestApart} A or V apart`);
  return {
    kind: 'measured',
    name,
    what: whatOf[name],
    ours: { value: ours * 1e6, unit: 'µs' },
    rival: { value: rival * 1e6, unit: 'µs', what },
    ratio: rival / ours,
    // Solving each group afresh is what a group costs; a sweep of one group is told beside it.
    bound: name === 'group-solve' ? { atLeast: 1000 } : 'none',
    beside,
  };
}

/** The median of so many times, after some that are not counted. */
async function oftenTimed(work: () => unknown, rounds: number): Promise<number> {
  const taken: number[] = [];
  for (let round = -Math.ceil(rounds / 10); round < rounds; round += 1) {
    const seconds = await secondsOf(work);
    if (round >= 0) taken.push(seconds);
  }
  return median(taken);
}

/** Each group under its own load, from the first to the last. */
function solver(groups: readonly Loaded[]): { readonly solve: () => void; readonly values: Float64Array } {
  const draws = groups.length;
  const walk = new ShareWalk(drawn(groups), sag);
  const loads = groups.map(({ load }) => Float64Array.of(load));
  const values = new Float64Array(draws * ((groups[0]?.branches.length ?? 0) + 1));
  return {
    values,
    solve: () => {
      for (let draw = 0; draw < draws; draw += 1) {
        walk.currentsAt(draw, loads[draw] as Float64Array, { values, draws });
      }
    },
  };
}

function drawn(groups: readonly Pick<Loaded, 'branches'>[]): readonly DrawnBranch[] {
  const [first] = groups;
  return (first?.branches ?? []).map((_, branch) => {
    const all = (of: keyof Branch): Float64Array =>
      Float64Array.from(groups, ({ branches }) => branches[branch]?.[of] ?? Number.NaN);
    return {
      voltage: all('voltage'),
      droop: all('droop'),
      ballast: all('ballast'),
      limit: all('limit'),
      past: 'holds',
      beyond: all('beyond'),
      ceiling: new Float64Array(groups.length).fill(Number.POSITIVE_INFINITY),
    };
  });
}

/** Some of its modules idle at some loads and are past their limits at others. */
function randomGroup(count: number): Loaded & { readonly most: number } {
  const branches = Array.from({ length: count }, (): Branch => ({
    voltage: random.uniform(15.1, 15.3),
    droop: random.uniform(0.01, 0.03),
    limit: random.uniform(4, 6),
    beyond: 5,
    ballast: random.uniform(0.045, 0.055),
  }));
  const most = branches.reduce((sum, { limit }) => sum + limit, 0);
  return { branches, most, load: random.uniform(0, most) };
}

async function inFolder<T>(work: (folder: string) => Promise<T>): Promise<T> {
  const folder = mkdtempSync(join(tmpdir(), 'railproof-speed-'));
  try {
    return await work(folder);
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
