export type Place = readonly [x: number, y: number];

/**
 * The places of a line without those that lie within `tolerance` of the straight line between the ones kept
 * (Douglas and Peucker 1973, with the distance taken along y, as a line over x asks for).
 */
export function straightened(places: readonly Place[], tolerance: number): readonly Place[] {
  const kept = new Set<number>([0, places.length - 1]);
  const open: [number, number][] = [[0, places.length - 1]];
  for (let stretch = open.pop(); stretch !== undefined; stretch = open.pop()) {
    const [first, last] = stretch;
    const { index, distance } = furthest(places, first, last);
    if (distance <= tolerance) continue;
    kept.add(index);
    open.push([first, index], [index, last]);
  }
  return places.filter((_, index) => kept.has(index));
}

function furthest(
  places: readonly Place[],
  first: number,
  last: number,
): { readonly index: number; readonly distance: number } {
  const [x0, y0] = places[first] ?? [0, 0];
  const [x1, y1] = places[last] ?? [0, 0];
  let worst = { index: first, distance: 0 };
  for (let index = first + 1; index < last; index += 1) {
    const [x, y] = places[index] ?? [0, 0];
    const straight = x1 === x0 ? y0 : y0 + ((y1 - y0) * (x - x0)) / (x1 - x0);
    // At one x a jump goes up and down: every place of it counts.
    const distance = Math.abs(y - straight) + (x1 === x0 ? Math.abs(y - y1) : 0);
    if (distance > worst.distance) worst = { index, distance };
  }
  return worst;
}
