import { readdirSync, statSync } from 'node:fs';
import { join } from 'node:path';
import type { FaultName } from './faults.js';
import type { Scene } from './moments.js';
import { page } from './small-disk.js';

export interface Hearing {
  /** Told of what the program says to the load. */
  readonly message: (message: string) => void;
  /** Whether the first step has begun: what is read before it is looked at and not reported. */
  readonly reporting: () => boolean;
}

/** Listens for the moment on the load's line; and for the first step, before which nothing is reported. */
export function hearing(
  { message: moment, stopAfter }: Scene,
  fault: FaultName,
  runs: string,
  acts: { readonly strike: () => void; readonly stop: () => void },
): Hearing {
  let reporting = false;
  let stage: 'before' | 'stoppable' | 'struck' = stopAfter === undefined ? 'stoppable' : 'before';
  let mayStop = false;
  return {
    reporting: () => reporting,
    message: (message) => {
      // The first thing of the first step, and said nowhere before it.
      if (message === 'INP OFF') reporting = true;
      if (message === stopAfter) mayStop = true;
      if (stage === 'before' && mayStop) {
        // A disk is full from one event to the next, and what makes safe writes few: it must be full by then.
        if (fault !== 'disk-full') {
          stage = 'stoppable';
          acts.stop();
        } else if (roomInLastPage(runs) < enoughForTheEnd) {
          stage = 'struck';
          acts.strike();
          acts.stop();
        }
        return;
      }
      if (stage !== 'stoppable' || message !== moment) return;
      stage = 'struck';
      acts.strike();
    },
  };
}

/** In bytes: the input that goes off and the end of the run, each with its seal, do not fit into less. */
const enoughForTheEnd = 300;

function roomInLastPage(runs: string): number {
  const [run = ''] = runsIn(runs);
  return page - (statSync(join(runs, run, 'journal.jsonl')).size % page);
}

/** The run's folder, beside what else is on the disk. */
export function runsIn(runs: string): string[] {
  return readdirSync(runs).filter((name) => name.endsWith('-brisk'));
}
