import type { Guaranteed, GuaranteedPoint } from '../../arrangement/staged-build.js';
import type { Amperes, Volts } from '../../quantity/quantity.js';
import { roundedDown } from '../../quantity/rounded-down.js';

/** A stretch of the output over which one arrangement feeds it and one thing sets the current. */
export interface Stretch {
  readonly from: Volts;
  readonly to: Volts;
  readonly least: Amperes;
  readonly most: Amperes;
  readonly of: Guaranteed;
}

export function stretchesOf(
  points: readonly GuaranteedPoint[],
  way: (point: GuaranteedPoint) => Guaranteed,
): readonly Stretch[] {
  return points.reduce<Stretch[]>((stretches, point) => {
    const of = way(point);
    const open = stretches.at(-1);
    if (open?.of.arrangement === of.arrangement && open.of.setBy === of.setBy) {
      stretches[stretches.length - 1] = {
        ...open,
        to: point.output,
        least: Math.min(open.least, of.current),
        most: Math.max(open.most, of.current),
      };
    } else {
      stretches.push({ from: point.output, to: point.output, least: of.current, most: of.current, of });
    }
    return stretches;
  }, []);
}

/** From the least to the most that is fed over a stretch, never rounded up; one number where they are the same. */
export function spanOf({ least, most }: Pick<Stretch, 'least' | 'most'>): string {
  const [low, high] = [roundedDown(least, 'current'), roundedDown(most, 'current')];
  return low === high ? low : `${low} to ${high}`;
}
