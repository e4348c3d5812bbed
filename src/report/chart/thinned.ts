/** A place on a chart, before it is known where that lies in the drawing. */
export interface Placed {
  readonly x: number;
  readonly y: number;
}

/**
 * Of many points the lowest and the highest in each of so many equal stretches of x, and those furthest left and
 * right, in the order in which they came: so a chart of any number of them keeps every peak, and its size. All of
 * them where they are few enough. Points without a place, NaN, are left out. Linear in the points.
 * @param across what the stretches divide; from the furthest left to the furthest right where left out.
 */
export function thinned<T extends Placed>(
  points: readonly T[],
  stretches: number,
  across?: readonly [from: number, to: number],
): readonly T[] {
  const there = points.filter(hasPlace);
  if (there.length <= 2 * stretches) return there;
  const ends: Extremes = { lowest: 0, highest: 0 };
  there.forEach((point, index) => {
    reached(ends, point.x, index, (at) => there[at]?.x ?? 0);
  });
  const [from, to] = across ?? [there[ends.lowest]?.x ?? 0, there[ends.highest]?.x ?? 0];
  const columns = new Map<number, Extremes>();
  there.forEach((point, index) => {
    const share = to > from ? (point.x - from) / (to - from) : 0;
    const column = Math.min(stretches - 1, Math.floor(share * stretches));
    const seen = columns.get(column);
    if (seen === undefined) columns.set(column, { lowest: index, highest: index });
    else reached(seen, point.y, index, (at) => there[at]?.y ?? 0);
  });
  const kept = new Set([ends, ...columns.values()].flatMap(({ lowest, highest }) => [lowest, highest]));
  return there.filter((_, index) => kept.has(index));
}

function hasPlace({ x, y }: Placed): boolean {
  return Number.isFinite(x) && !Number.isNaN(y);
}

/** Where the lowest and the highest value stand; of equals, the first. */
interface Extremes {
  lowest: number;
  highest: number;
}

function reached(extremes: Extremes, value: number, index: number, at: (index: number) => number): void {
  if (value < at(extremes.lowest)) extremes.lowest = index;
  if (value > at(extremes.highest)) extremes.highest = index;
}
