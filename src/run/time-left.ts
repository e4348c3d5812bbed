import type { Seconds } from '../quantity/quantity.js';
import type { PlanStep } from './plan.js';

/**
 * About how long what is left of a plan takes: what the step under way was thought to need and has not had, and all
 * that come after it. A step that takes longer than was thought adds nothing, so it is never less than nothing.
 * @param step the one under way, counted from 1; 0 before the first.
 * @param inStep how long it has been under way.
 */
export function timeLeft(
  steps: readonly Pick<PlanStep, 'duration'>[],
  step: number,
  inStep: Seconds,
): Seconds {
  const thought = steps[step - 1]?.duration ?? 0;
  const later = steps.slice(step).reduce((sum, { duration }) => sum + duration, 0);
  return Math.max(0, thought - inStep) + later;
}
