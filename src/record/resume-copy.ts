import { basename, resolve } from 'node:path';
import type { Resumed, TimedEvent } from './journal-event.js';
import { readJournal } from './journal-reader.js';
import type { JournalWriter } from './journal-writer.js';
import { BadRecordError } from './record-error.js';
import type { UnfinishedRun } from './resume.js';

/**
 * Begins the journal of a run that goes on with what was done: from which run, then every event of the steps
 * that were finished, with its time, sealed anew. Event by event, however many there are; the record that
 * they come from is only read.
 * @throws RecordWriteError, NoRecordError
 * @throws BadRecordError when the earlier journal is not what it was a moment ago
 */
export function copyDoneSteps(run: UnfinishedRun, journal: JournalWriter): void {
  const { folder, done, integrity, until } = run;
  for (const event of [...run.resumed, resumedFrom(run)]) journal.copy({ ...unsealed(event), t: 0 });
  let copied = 0;
  let inside = false;
  readJournal(folder.journal, integrity, (event) => {
    if (copied === done.length) return;
    if (event.event === 'step-began') inside = true;
    if (inside) journal.copy(unsealed(event));
    if (event.event === 'step-ended') {
      inside = false;
      copied += 1;
    }
  });
  if (copied !== done.length) throw new BadRecordError(folder.journal, 'it changed while it was read');
  journal.goOnFrom(until);
}

function resumedFrom({ folder, sha256, header, done }: UnfinishedRun): Resumed {
  const run = basename(resolve(folder.path));
  return { event: 'resumed', run, header: sha256, began: header.began, steps: done.length };
}

/** The seal of the other journal says nothing in this one. */
function unsealed<Event extends TimedEvent | Resumed>(event: Event): Event {
  const { seal, ...rest } = event as Event & { readonly seal?: unknown };
  return seal === undefined ? event : (rest as unknown as Event);
}
