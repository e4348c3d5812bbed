/** Points in ascending order of x, in memory that a fit may read fast. */
export interface SortedPoints {
  readonly x: Float64Array;
  readonly y: Float64Array;
}

/**
 * Points in ascending order of x; those of equal x stay in their order. Data that ascend already are taken as
 * they are (typed arrays are not even copied), data that descend are turned round; only the rest is sorted, in
 * time linear in the number of points unless most of them lie close together. x and y of the same length.
 */
export function sortedPoints(x: ArrayLike<number>, y: ArrayLike<number>): SortedPoints {
  const given = {
    x: x instanceof Float64Array ? x : Float64Array.from(x),
    y: y instanceof Float64Array ? y : Float64Array.from(y),
  };
  if (ascends(given.x)) return given;
  if (descends(given.x)) return { x: given.x.toReversed(), y: given.y.toReversed() };
  const dealt = dealtByPlace(given);
  return settled(dealt) ? dealt : compared(dealt);
}

function ascends(values: Float64Array): boolean {
  for (let index = 1; index < values.length; index += 1) {
    if ((values[index] as number) < (values[index - 1] as number)) return false;
  }
  return true;
}

function descends(values: Float64Array): boolean {
  for (let index = 1; index < values.length; index += 1) {
    if ((values[index] as number) > (values[index - 1] as number)) return false;
  }
  return true;
}

/** More piles than these, and the places on which they grow no longer stay in the processor's nearest memory. */
const pileBits = 11;

/**
 * The way from the lowest x to the highest is cut in places, at least one for each point, and the points are
 * brought in the order of their places: dealt on piles by the last digit of the place, then by the digit before.
 */
function dealtByPlace(given: SortedPoints): SortedPoints {
  const [low, high] = ends(given.x);
  const bits = Math.min(31, Math.ceil(Math.log2(given.x.length)));
  const deals = Math.ceil(bits / pileBits);
  const bitsOfDeal = Math.ceil(bits / deals);
  const perUnit = (2 ** bits - 1) / (high - low);
  let points = given;
  for (let deal = 0; deal < deals; deal += 1) {
    points = dealt(points, { low, perUnit, shift: deal * bitsOfDeal, mask: 2 ** bitsOfDeal - 1 });
  }
  return points;
}

function ends(values: Float64Array): readonly [low: number, high: number] {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (let index = 0; index < values.length; index += 1) {
    const value = values[index] as number;
    if (value < low) low = value;
    if (value > high) high = value;
  }
  return [low, high];
}

/** A digit of the place of an x. */
interface Digit {
  readonly low: number;
  readonly perUnit: number;
  readonly shift: number;
  readonly mask: number;
}

function dealt({ x, y }: SortedPoints, { low, perUnit, shift, mask }: Digit): SortedPoints {
  const next = new Uint32Array(mask + 1);
  for (let index = 0; index < x.length; index += 1) {
    const pile = ((((x[index] as number) - low) * perUnit) >>> shift) & mask;
    next[pile] = (next[pile] as number) + 1;
  }
  let begun = 0;
  for (let pile = 0; pile <= mask; pile += 1) {
    const size = next[pile] as number;
    next[pile] = begun;
    begun += size;
  }
  const onPiles = { x: new Float64Array(x.length), y: new Float64Array(x.length) };
  for (let index = 0; index < x.length; index += 1) {
    const place = x[index] as number;
    const pile = (((place - low) * perUnit) >>> shift) & mask;
    const at = next[pile] as number;
    next[pile] = at + 1;
    onPiles.x[at] = place;
    onPiles.y[at] = y[index] as number;
  }
  return onPiles;
}

/** For each point, on the average; where many lie close together comparing costs less. */
const mostMoves = 8;

/** Brings the points of one place in order, each by moving those above it up; whether that was soon done. */
function settled({ x, y }: SortedPoints): boolean {
  let left = mostMoves * x.length;
  for (let index = 1; index < x.length; index += 1) {
    const place = x[index] as number;
    if (!(place < (x[index - 1] as number))) continue;
    const height = y[index] as number;
    let at = index;
    for (; at > 0 && (x[at - 1] as number) > place; at -= 1) {
      x[at] = x[at - 1] as number;
      y[at] = y[at - 1] as number;
    }
    x[at] = place;
    y[at] = height;
    left -= index - at;
    if (left < 0) return false;
  }
  return true;
}

function compared({ x, y }: SortedPoints): SortedPoints {
  const order = Uint32Array.from(x.keys());
  order.sort((one, other) => (x[one] as number) - (x[other] as number));
  return {
    x: Float64Array.from(order, (index) => x[index] as number),
    y: Float64Array.from(order, (index) => y[index] as number),
  };
}
