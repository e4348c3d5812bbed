import type { Estimate } from '../../arrangement/build.js';
import { formatInterval } from '../../quantity/format-quantity.js';
import type { Dimension } from '../../quantity/quantity.js';
import { briefDigits } from './brief.js';

/** In two columns: `9.68 A` and `9.52 to 9.85 A`. */
export function estimateCells(estimate: Estimate, dimension: Dimension): [value: string, range: string] {
  const { value, low, high, unit } = formatInterval(estimate.value, estimate.low, estimate.high, dimension);
  const said = `${estimate.bound === 'least' ? '≥ ' : ''}${value} ${unit}`;
  if (low === '' && high === '') return [said, ''];
  if (high === '' || estimate.bound === 'least') return [said, low === '' ? '' : `from ${low} ${unit}`];
  return [said, low === '' ? `to ${high} ${unit}` : `${low} to ${high} ${unit}`];
}

/** In a sentence: `9.68 A (9.52 to 9.85 A)`. */
export function estimateInWords(estimate: Estimate, dimension: Dimension): string {
  const [value, range] = estimateCells(estimate, dimension);
  const said = value.replace('≥', 'at least');
  return range === '' ? said : `${said} (${range})`;
}

/** The limits alone, their unit said elsewhere: `3.77 to 3.93`; as many decimals as half their distance tells. */
export function between(low: number, high: number): string {
  const half = Math.abs(high - low) / 2;
  if (!(half > 1e-9 * Math.abs(high))) return briefDigits(low);
  const decimals = Math.min(3, Math.max(0, 1 - Math.floor(Math.log10(half))));
  const [from, to] = [low.toFixed(decimals), high.toFixed(decimals)];
  return from === to ? from : `${from} to ${to}`;
}

/** A line of a chart at a place of its own: straight between the places that were worked out, level beyond them. */
export function valueAt(places: readonly number[], line: readonly number[], place: number): number {
  const after = places.findIndex((each) => each >= place);
  if (after === -1) return line.at(-1) ?? Number.NaN;
  const [x0, x1] = [places[after - 1], places[after]];
  const [y0, y1] = [line[after - 1], line[after]];
  if (x0 === undefined || y0 === undefined || x1 === undefined || y1 === undefined) return y1 ?? Number.NaN;
  return y0 + ((y1 - y0) * (place - x0)) / (x1 - x0);
}
