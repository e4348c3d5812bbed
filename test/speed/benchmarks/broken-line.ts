import type * as brokenLineFit from '../../../src/statistics/broken-line-fit.js';
import type * as lineFit from '../../../src/statistics/line-fit.js';
import type * as randomness from '../../../src/statistics/random.js';
import { built } from '../built.js';
import type { Benchmark, Bound, Figure } from '../figure.js';
import { timedSideBySide } from '../side-by-side.js';

const { fitBrokenLine } = await built<typeof brokenLineFit>('statistics/broken-line-fit.js');
const { fitLine } = await built<typeof lineFit>('statistics/line-fit.js');
const { randomFrom } = await built<typeof randomness>('statistics/random.js');

const goal = { atMost: 5 } as const;

export default (async () => {
  const few = { repeats: 200, rounds: 31 };
  const many = { repeats: 1, rounds: 11 };
  return [
    await fitted(inOrder(1_000), 'in-order', few, goal),
    await fitted(inDisorder(1_000), 'in-disorder', few, goal),
    await fitted(inOrder(1_000_000), 'in-order', many, goal),
    // The straight line needs no order. To make one of a million points costs more than both fits; nobody here does.
    await fitted(inDisorder(1_000_000), 'in-disorder', many, 'none'),
  ];
}) satisfies Benchmark;

interface Points {
  readonly x: Float64Array;
  readonly y: Float64Array;
}

/** The voltage of a module that leaves its droop for a steeper limit at 5 A, with a millivolt of noise. */
function inOrder(points: number): Points {
  const random = randomFrom(points);
  const x = Float64Array.from({ length: points }, (_, index) => (8 * index) / points);
  const y = x.map((current) => 15 - 0.02 * current - 2 * Math.max(0, current - 5) + 0.001 * random.normal());
  return { x, y };
}

/** The same points, shuffled. */
function inDisorder(points: number): Points {
  const { x, y } = inOrder(points);
  const random = randomFrom(-points);
  for (let left = points; left > 1; left -= 1) {
    const drawn = Math.floor(random.uniform(0, left));
    for (const values of [x, y]) {
      const last = values[left - 1] as number;
      values[left - 1] = values[drawn] as number;
      values[drawn] = last;
    }
  }
  return { x, y };
}

async function fitted(
  { x, y }: Points,
  order: 'in-order' | 'in-disorder',
  { repeats, rounds }: { readonly repeats: number; readonly rounds: number },
  bound: Bound,
): Promise<Figure> {
  const repeatedly = (fit: () => unknown) => (): unknown => {
    let last: unknown;
    for (let turn = 0; turn < repeats; turn += 1) last = fit();
    return last;
  };
  const { ours, rival, ratio } = await timedSideBySide({
    ours: repeatedly(() => fitBrokenLine(x, y)),
    rival: repeatedly(() => fitLine(x, y)),
    rounds,
    unmeasured: 3,
  });
  return {
    kind: 'measured',
    name: `broken-line-of-${x.length}-${order}`,
    what: `broken line through ${x.length} points ${order.replace('-', ' ')}`,
    ours: { value: (ours / repeats) * 1000, unit: 'ms' },
    rival: { value: (rival / repeats) * 1000, unit: 'ms', what: 'straight line' },
    ratio,
    bound,
    beside: { breakpoint: fitBrokenLine(x, y)?.breakpoint ?? 'none found' },
  };
}
