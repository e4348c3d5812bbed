/** A stretch of numbers, and those at which something is written. */
export interface Scale {
  readonly low: number;
  readonly high: number;
  readonly ticks: readonly { readonly value: number; readonly label: string }[];
}

/** A little room at both ends, so that no point stands on the edge. */
const margin = 0.04;

/**
 * The scale on which all of these stand, with no more ticks than are wanted, at steps of 1, 2 or 5 times a power of
 * ten. Values that are all the same stand in its middle. Undefined where there is none, or where they are too far apart
 * to reckon with.
 */
export function scaleOf(values: readonly number[], most: number): Scale | undefined {
  const least = values.reduce((one, other) => Math.min(one, other), Infinity);
  const greatest = values.reduce((one, other) => Math.max(one, other), -Infinity);
  const spread = greatest - least;
  if (!Number.isFinite(spread)) return undefined;
  // Closer together than a number can tell apart counts as the same.
  const size = Math.max(Math.abs(least), Math.abs(greatest));
  const room = spread > size * 1e-9 ? spread * margin : size * 0.01 || 1;
  const [low, high] = [least - room, greatest + room];
  if (!Number.isFinite(high - low)) return undefined;
  return { low, high, ticks: ticksOf(low, high, most) };
}

function ticksOf(low: number, high: number, most: number): Scale['ticks'] {
  const step = stepOf((high - low) / Math.max(1, most));
  const decimals = Math.max(0, -Math.floor(Math.log10(step) + 1e-9));
  const first = Math.ceil(low / step);
  const count = Math.min(most, Math.floor(high / step) - first + 1);
  return Array.from({ length: Math.max(0, count) }, (_, index) => {
    const value = (first + index) * step;
    return { value, label: labelOf(value, decimals) };
  });
}

/** The least step of 1, 2 or 5 times a power of ten that is no smaller. */
function stepOf(least: number): number {
  const power = 10 ** Math.floor(Math.log10(least));
  const factor = [1, 2, 5, 10].find((each) => each * power >= least * (1 - 1e-9)) ?? 10;
  return factor * power;
}

function labelOf(value: number, decimals: number): string {
  if (decimals > 4 || Math.abs(value) >= 1e6) return value.toExponential(2);
  return value.toFixed(decimals).replace(/^-(0(?:\.0*)?)$/, '$1');
}

/** Where on the way from its low end, 0, to its high end, 1. */
export function shareOf({ low, high }: Scale, value: number): number {
  return (value - low) / (high - low);
}
