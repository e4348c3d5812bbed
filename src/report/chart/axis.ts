import { scaleLinear } from 'd3-scale';
import type { Dimension } from '../../quantity/quantity.js';
import { type Scale, scalesOf } from '../../quantity/units.js';

/** What an axis shows. */
export interface AxisWish {
  readonly label: string;
  readonly dimension: Dimension;
  readonly from: number;
  readonly to: number;
  /** Whether it may be a little longer, so that it ends at round numbers. */
  readonly round?: boolean;
}

/** An axis laid on a stretch of the drawing. */
export interface Axis {
  readonly label: string;
  /** In units of the drawing. */
  at(value: number): number;
  readonly start: number;
  readonly end: number;
  readonly ticks: readonly { readonly value: number; readonly text: string }[];
}

/** An axis whose ticks stand at round numbers, all in one unit, which stands with the label: `Load (A)`. */
export function axisOf(wish: AxisWish, [start, end]: readonly [number, number], ticks: number): Axis {
  const unit = unitFor(wish);
  const size = unit.factor * 10 ** unit.shift;
  // In the unit shown, so that ticks are round in that: minutes, not seconds.
  const scale = scaleLinear([wish.from / size, wish.to / size], [start, end]);
  if (wish.round === true) scale.nice(ticks);
  return {
    label: `${wish.label} (${unit.symbol})`,
    at: (value) => scale(value / size),
    start,
    end,
    ticks: scale.ticks(ticks).map((value) => ({ value: value * size, text: tickText(value) })),
  };
}

/** A domain that holds all values, with some air round them where it begins at none of them. */
export function domainOf(values: readonly number[], least?: number): { from: number; to: number } {
  const [lowest, high] = extremesOf(values);
  const low = least ?? lowest;
  if (!Number.isFinite(low) || !Number.isFinite(high)) return { from: 0, to: 1 };
  const air = high > low ? (high - low) * 0.06 : Math.max(Math.abs(high) * 0.02, 1e-3);
  return { from: least ?? low - air, to: high + air };
}

/** Of those that are finite; turned round where there are none. Not by `Math.min(...)`, which can't take so many. */
export function extremesOf(values: readonly number[]): readonly [lowest: number, highest: number] {
  let lowest = Infinity;
  let highest = -Infinity;
  for (const value of values) {
    if (!Number.isFinite(value)) continue;
    if (value < lowest) lowest = value;
    if (value > highest) highest = value;
  }
  return [lowest, highest];
}

function unitFor({ dimension, from, to }: AxisWish): Scale {
  const scales = scalesOf(dimension);
  const greatest = Math.max(Math.abs(from), Math.abs(to));
  const plain = scales.find(({ factor, shift }) => factor === 1 && shift >= 0) ?? scales[0];
  // From half a unit on, the unit itself is what people expect: 0.8 A, not 800 mA; but 100 min, not 1.67 h.
  const enough = dimension === 'time' ? 2 : 0.5;
  const fitting = scales.findLast(({ factor, shift }) => greatest >= enough * factor * 10 ** shift);
  const unit = dimension === 'ratio' ? scales[0] : (fitting ?? plain);
  if (unit === undefined) throw new RangeError(`no unit for ${dimension}`);
  return unit;
}

function tickText(value: number): string {
  return String(Number(value.toPrecision(6))).replace('-', '−');
}
