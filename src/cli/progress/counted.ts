import type { RunProgress } from './run-progress.js';
import type { RunSoFar } from './run-so-far.js';

/** Counts a run, once, and then tells those who show it, who find it counted. */
export function counted(run: RunSoFar, ...shown: readonly RunProgress[]): RunProgress {
  return {
    stepBegan: (step, kind, summary) => {
      run.stepBegan(step);
      for (const each of shown) each.stepBegan(step, kind, summary);
    },
    progress: (step, progress) => {
      run.seen(progress);
      for (const each of shown) each.progress(step, progress);
    },
    recorded: (event) => {
      run.recorded(event);
      for (const each of shown) each.recorded(event);
    },
    noticed: (text) => {
      for (const each of shown) each.noticed(text);
    },
    end: () => {
      for (const each of shown) each.end();
    },
  };
}
