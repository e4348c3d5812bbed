import type { Seconds } from '../quantity/quantity.js';

/**
 * The first moment, to a microsecond, at which something that held at `from` no longer holds; it is given as
 * the end of the bisection at which it fails, so that time goes on.
 */
export function firstFailing(holds: (at: Seconds) => boolean, from: Seconds, to: Seconds): Seconds {
  let good = from;
  let bad = to;
  for (let halving = 0; halving < 60 && bad - good > 1e-6; halving++) {
    const middle = (good + bad) / 2;
    if (holds(middle)) good = middle;
    else bad = middle;
  }
  return bad;
}
