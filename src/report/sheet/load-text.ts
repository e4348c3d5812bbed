import type { Amperes } from '../../quantity/quantity.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { brief } from '../build/brief.js';

/** The load at which the numbers of a sheet are given; one that is recommended does not grow by being written. */
export function loadText({
  current,
  from,
}: {
  readonly current: Amperes;
  readonly from: 'asked-for' | 'recommended';
}): string {
  return from === 'recommended' ? roundedDown(current, 'current') : brief(current, 'current');
}
