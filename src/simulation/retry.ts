import type { Ratio, Seconds } from '../quantity/quantity.js';

/**
 * The share of each period in which a hiccuping module tries. Small enough that a shorted module stays cool,
 * which is what hiccup is for; large enough to start up against a discharged output.
 */
export const ATTEMPT_SHARE: Ratio = 0.15;

/** How often a constant-power module tries to start after its under-voltage shutdown. */
export const SHUTDOWN_PERIOD: Seconds = 0.6;

/** Sums of periods are rounded; this much of a period is none. */
const ROUNDING = 1e-9;

/** Whether a module that first tripped at `since` is just trying. The trip itself is its first attempt. */
export function attempting(since: Seconds, period: Seconds, at: Seconds): boolean {
  const periods = (at - since) / period;
  return periods - Math.floor(periods + ROUNDING) < ATTEMPT_SHARE;
}

/** Whether a new attempt begins at this very moment. */
export function attemptBegins(since: Seconds, period: Seconds, at: Seconds): boolean {
  const periods = (at - since) / period;
  return periods > 0.5 && Math.abs(periods - Math.round(periods)) < ROUNDING;
}

/** The first moment after `at` at which a new attempt begins. */
export function nextAttempt(since: Seconds, period: Seconds, at: Seconds): Seconds {
  return since + (Math.floor((at - since) / period + ROUNDING) + 1) * period;
}
