import type {
  JournalEvent,
  Phase,
  PointOutcome,
  ReadingTaken,
  StepEnded,
} from '../../../src/record/journal-event.js';
import type * as journalEvent from '../../../src/record/journal-event.js';
import type * as journalWriter from '../../../src/record/journal-writer.js';
import type * as runFolder from '../../../src/record/run-folder.js';
import type { RunHeader } from '../../../src/record/run-header.js';
import type { Random } from '../../../src/statistics/random.js';
import { built } from '../built.js';

const { journalFormat } = await built<typeof journalEvent>('record/journal-event.js');
const { JournalWriter } = await built<typeof journalWriter>('record/journal-writer.js');
const { runFolderAt, writeHeader } = await built<typeof runFolder>('record/run-folder.js');

/** What one instrument says at one moment; `by` as in a journal, "meter" or "load". */
export type Read = Pick<ReadingTaken, 'of' | 'what' | 'at' | 'value'>;

export interface PointWritten {
  readonly phase: Phase;
  /** In A; left out with the input off. */
  readonly current?: number;
  readonly of?: string;
  readonly outcome: PointOutcome;
  readonly samples: number;
  /** What is read at one moment, in the order in which a run reads it. */
  readonly read: () => readonly Read[];
}

/** From a question to its answer, on a bench like the simulated one; in s. */
const perReading = 0.011;

/**
 * A record that is written by the program's own writer in the rhythm of a run, but without its bench, and not
 * flushed: it is thrown away.
 */
export class WrittenRun {
  readonly #journal: InstanceType<typeof journalWriter.JournalWriter>;
  readonly #random: Random;
  #now = 0;
  #step = 0;
  #point = 0;
  #readings = 0;

  /** @param folder which is there, and empty */
  constructor(folder: string, header: RunHeader, random: Random) {
    this.#random = random;
    const files = runFolderAt(folder);
    const sha256 = writeHeader(files, header);
    this.#journal = new JournalWriter(
      files.journal,
      () => this.#now,
      () => undefined,
    );
    this.append({ event: 'opened', format: journalFormat, wallClock: header.began, header: sha256 });
    for (const { role, address, identity } of header.instruments) {
      this.append({ event: 'instrument', role, address, identity });
    }
  }

  get readings(): number {
    return this.#readings;
  }

  get step(): number {
    return this.#step;
  }

  append(event: JournalEvent): void {
    this.#journal.append(event);
  }

  pass(seconds: number): void {
    this.#now += seconds;
  }

  stepBegan(kind: string): void {
    this.#step += 1;
    this.#point = 0;
    this.append({ event: 'step-began', step: this.#step, kind });
  }

  stepEnded(carried: StepEnded['carried'] & object): void {
    this.append({ event: 'step-ended', step: this.#step, carried });
  }

  input(state: 'on' | 'off'): void {
    if (state === 'on') this.append({ event: 'input', state, confirmed: false });
    this.pass(0.002);
    this.append({ event: 'input', state, confirmed: true });
  }

  point({ phase, current, of, outcome, samples, read }: PointWritten): void {
    this.#point += 1;
    const where = { step: this.#step, point: this.#point };
    const set = current === undefined ? {} : { current };
    this.append({ event: 'point-began', ...where, phase, set, ...(of === undefined ? {} : { of }) });
    this.pass(0.5);
    for (let sample = 1; sample <= samples; sample += 1) {
      for (const reading of read()) {
        this.pass(perReading);
        this.append({ event: 'reading', ...where, sample, ...reading });
        this.#readings += 1;
      }
      // Strewn, so that no swing of the mains is in step with it.
      this.pass(this.#random.uniform(0.01, 0.03));
    }
    this.append({ event: 'point-ended', ...where, outcome });
  }

  ended(): void {
    this.input('off');
    this.append({ event: 'ended', how: 'completed', reason: null, status: 0 });
    this.#journal.close();
  }
}

/** As an instrument prints it. */
export function shown(value: number, decimals: number): number {
  return Number(value.toFixed(decimals));
}
