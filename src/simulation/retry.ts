import type { Ratio, Seconds } from '../quantity/quantity.js';

/**
 * The share of each period in which a hiccuping module tries. Small enough that a shorted module stays cool,
 * which is what hiccup is for; large enough to start up against a discharged output.
 */
export const ATTEMPT_SHARE: Ratio = 0.15;

/** How often a constant-power module tries to start after its under-voltage shutdown. */
export const SHUTDOWN_PERIOD: Seconds = 0.6;

/** Whether a module that first tripped at `since` is just trying. The trip itself is its first attempt. */
export function attempting(since: Seconds, period: Seconds, at: Seconds): boolean {
  return phaseOf(since, period, at) < ATTEMPT_SHARE * period;
}

/** The first moment from `at` on at which the module is trying: now, or the beginning of the next period. */
export function nextAttempt(since: Seconds, period: Seconds, at: Seconds): Seconds {
  if (attempting(since, period, at)) return at;
  return since + (Math.floor((at - since) / period) + 1) * period;
}

function phaseOf(since: Seconds, period: Seconds, at: Seconds): Seconds {
  const periods = (at - since) / period;
  // A moment computed as the beginning of a period may be rounded to just before it.
  const whole = Math.floor(periods + 1e-9);
  return Math.max(0, periods - whole) * period;
}
