import type * as brokenLineFit from '../../../src/statistics/broken-line-fit.js';
import type * as lineFit from '../../../src/statistics/line-fit.js';
import type * as randomness from '../../../src/statistics/random.js';
import { built } from '../built.js';
import type { Benchmark, Figure } from '../figure.js';
import { timedSideBySide } from '../side-by-side.js';

const { fitBrokenLine } = await built<typeof brokenLineFit>('statistics/broken-line-fit.js');
const { fitLine } = await built<typeof lineFit>('statistics/line-fit.js');
const { randomFrom } = await built<typeof randomness>('statistics/random.js');

export default (async () => [
  await fitted(1_000, { repeats: 200, rounds: 31 }),
  await fitted(1_000_000, { repeats: 1, rounds: 11 }),
]) satisfies Benchmark;

/** The voltage of a module that leaves its droop for a steeper limit at 5 A, with a millivolt of noise. */
async function fitted(
  points: number,
  { repeats, rounds }: { readonly repeats: number; readonly rounds: number },
): Promise<Figure> {
  const random = randomFrom(points);
  const x = Float64Array.from({ length: points }, (_, index) => (8 * index) / points);
  const y = x.map((current) => 15 - 0.02 * current - 2 * Math.max(0, current - 5) + 0.001 * random.normal());
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
    name: `broken-line-of-${points}`,
    what: `broken line through ${points} points`,
    ours: { value: (ours / repeats) * 1000, unit: 'ms' },
    rival: { value: (rival / repeats) * 1000, unit: 'ms', what: 'straight line' },
    ratio,
    bound: { atMost: 5 },
    beside: { breakpoint: fitBrokenLine(x, y)?.breakpoint ?? 'none found' },
  };
}
