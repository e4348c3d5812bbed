import { loadPlan } from '../../../src/cli/load-plan.js';
import { RunSoFar } from '../../../src/cli/progress/run-so-far.js';
import { VirtualClock } from '../../../src/clock/virtual-clock.js';
import type { JournalEvent } from '../../../src/record/journal-event.js';

export const { plan } = await loadPlan({
  procedure: 'real-limit',
  bench: 'fixtures/benches/nursery.yaml',
  modules: ['fixtures/modules/K1.yaml'],
});

/** The run of five steps, before its first one. */
export function aRun(done = 0): { readonly run: RunSoFar; readonly clock: VirtualClock } {
  const clock = new VirtualClock(new Date(0));
  return { run: new RunSoFar(plan, clock, done), clock };
}

export function pointEnded(outcome: 'held' | 'dropped' | 'measured' | 'interrupted', step = 1): JournalEvent {
  return { event: 'point-ended', step, point: 1, outcome };
}

export function stepEnded(step: number): JournalEvent {
  return { event: 'step-ended', step };
}
