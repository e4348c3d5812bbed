import type { RunProgress } from './run-progress.js';

/** Several who watch a run, each told of everything. */
export function together(...watchers: readonly RunProgress[]): RunProgress {
  return {
    stepBegan: (step, kind, summary) => {
      for (const each of watchers) each.stepBegan(step, kind, summary);
    },
    progress: (step, progress) => {
      for (const each of watchers) each.progress(step, progress);
    },
    recorded: (event) => {
      for (const each of watchers) each.recorded(event);
    },
    noticed: (text) => {
      for (const each of watchers) each.noticed(text);
    },
    end: () => {
      for (const each of watchers) each.end();
    },
  };
}
