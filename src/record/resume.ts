import type { Seconds } from '../quantity/quantity.js';
import type { Carried, Ended, Resumed, StepBegan, StepEnded, TimedEvent } from './journal-event.js';
import { checkJournal, type Integrity, otherHeader } from './journal-check.js';
import { readJournal } from './journal-reader.js';
import { BadRecordError } from './record-error.js';
import { NotResumableError } from './resume-error.js';
import { type RunFolder, runFolderAt } from './run-folder.js';
import { readHeader, type RunHeader } from './run-header.js';

/** A run that was broken off, as far as another one can go on from it. */
export interface UnfinishedRun {
  readonly folder: RunFolder;
  readonly header: RunHeader;
  /** SHA-256 of run.json. */
  readonly sha256: string;
  readonly integrity: Integrity;
  /** The runs that it was itself resumed from, the first of them first. */
  readonly resumed: readonly Resumed[];
  /** The steps that were finished: the first ones of the procedure, one at least. */
  readonly done: readonly DoneStep[];
  /** What was found out up to the end of the last of them. */
  readonly carried: Carried;
  /** The time of the last event that a run which goes on takes over. */
  readonly until: Seconds;
  /** Undefined where the record was cut off. */
  readonly ended: Ended | undefined;
}

export interface DoneStep {
  readonly step: number;
  readonly kind: string;
  /** What the person at the bench was asked for last. */
  readonly asked: string | undefined;
}

/**
 * Reads of a record what was done, in one pass and in bounded memory.
 * @throws NoRecordError, BadRecordError
 * @throws NotResumableError when the run was completed, when the record is damaged, when no step of it was
 * finished, or when its steps do not say what later ones rest on
 */
export function readUnfinished(path: string): UnfinishedRun {
  const folder = runFolderAt(path);
  const { header, sha256 } = readHeader(path);
  const seen = new DoneSteps(folder, header);
  const checked = checkJournal(folder.journal);
  const integrity =
    checked.kind === 'damaged'
      ? checked
      : readJournal(folder.journal, checked, (event) => {
          seen.add(event);
        });
  if (integrity.kind === 'damaged') throw damaged(path, integrity.line, integrity.problem);
  const { begunWith, resumed, done, carried, until, ended } = seen;
  if (begunWith !== undefined && begunWith !== sha256) throw damaged(path, 1, otherHeader);
  if (ended?.how === 'completed')
    throw new NotResumableError(
      path,
      'the run was completed, there is nothing to continue',
      '`railproof analyse <run>` shows what it found',
    );
  if (carried === undefined) throw nothingToGoOnFrom(path, seen.endedWithout);
  return { folder, header, sha256, integrity, resumed, done, carried, until, ended };
}

/** What a journal tells of the steps that were finished, event by event. */
class DoneSteps {
  readonly #folder: RunFolder;
  readonly #header: RunHeader;
  readonly resumed: Resumed[] = [];
  readonly done: DoneStep[] = [];
  begunWith: string | undefined;
  carried: Carried | undefined;
  until: Seconds = 0;
  ended: Ended | undefined;
  /** A step ended and did not say what it carries. */
  endedWithout = false;
  #asked: string | undefined;
  #latest: Seconds = 0;

  constructor(folder: RunFolder, header: RunHeader) {
    this.#folder = folder;
    this.#header = header;
  }

  add(event: TimedEvent): void {
    this.#latest = Math.max(this.#latest, event.t);
    if (event.event === 'opened') this.begunWith = event.header;
    if (event.event === 'resumed') this.resumed.push(event);
    if (event.event === 'step-began') this.#begin(event);
    if (event.event === 'prompt') this.#asked = event.text;
    if (event.event === 'step-ended') this.#end(event);
    if (event.event === 'ended') this.ended = event;
  }

  #begin({ step, kind }: StepBegan): void {
    this.#asked = undefined;
    if (kind !== this.#header.steps[step - 1]?.kind)
      throw this.#odd(`step ${step} of the journal is none that run.json planned`);
  }

  #end({ step, carried }: StepEnded): void {
    if (carried === undefined || this.endedWithout) {
      this.endedWithout = true;
      return;
    }
    const planned = this.#header.steps[step - 1];
    if (planned === undefined || step !== this.done.length + 1)
      throw this.#odd(`step ${step} of the journal ended out of turn`);
    this.done.push({ step, kind: planned.kind, asked: this.#asked });
    this.carried = carried;
    this.until = this.#latest;
  }

  #odd(problem: string): BadRecordError {
    return new BadRecordError(this.#folder.journal, problem);
  }
}

function damaged(path: string, line: number, problem: string): NotResumableError {
  return new NotResumableError(
    path,
    `line ${line} of its journal: ${problem}`,
    'a record that was changed is nothing to build on: run it afresh; `railproof analyse <run>` shows what is whole',
  );
}

function nothingToGoOnFrom(path: string, endedWithout: boolean): NotResumableError {
  return endedWithout
    ? new NotResumableError(
        path,
        'it was made before steps wrote down what later ones rest on',
        'run it afresh',
      )
    : new NotResumableError(path, 'no step of it was finished', 'there is nothing to lose: run it afresh');
}
