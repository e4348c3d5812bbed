import { resolve } from 'node:path';
import { sayWhatIsOn } from '../bench/found-on.js';
import type { OpenBench } from '../bench/open-bench.js';
import { JournalWriter } from '../record/journal-writer.js';
import { journalFormat, type JournalEvent } from '../record/journal-event.js';
import { writeReadingsCsv } from '../record/readings-csv.js';
import { copyDoneSteps } from '../record/resume-copy.js';
import { RecordWriteError } from '../record/record-error.js';
import { makeRunFolder, replaceFile, type RunFolder, writeHeader } from '../record/run-folder.js';
import { jsonText } from '../report/json-text.js';
import { resultAsJson } from '../report/json.js';
import type { Result } from '../report/result.js';
import { understand } from '../report/understand.js';
import { type Performed, perform, type RunWatcher } from '../run/perform.js';
import type { Operator } from '../steps/operator.js';
import { headerOf } from './header-of.js';
import type { LoadedPlan } from './load-plan.js';
import { madeAt } from './made-at.js';
import { openForRun } from './open-for-run.js';
import type { Resumption } from './resume-plan.js';
import { instrumentsInWords, versionsInWords } from './resume-shown.js';
import type { Watchman } from './watchman.js';
import type { World } from './wiring.js';

export interface PlanPerformed extends Performed {
  readonly folder: RunFolder;
  /** What the record shows; or why it can't be told, which must not hide how the bench was left. */
  readonly understood:
    | {
        readonly kind: 'result';
        readonly result: Result;
        /** Why readings.csv, findings.json and report.html are not all there, where they are not. */
        readonly unkept: RecordWriteError | undefined;
      }
    | { readonly kind: 'error'; readonly error: unknown };
}

/** Where the report of a run lies; undefined where none was written. */
export function reportOf({ understood, folder }: PlanPerformed): string | undefined {
  return understood.kind === 'result' && understood.unkept === undefined ? folder.report : undefined;
}

export interface PerformOptions {
  readonly runs: string;
  readonly operator: Operator;
  readonly signal: AbortSignal;
  /** Aborted by whoever will not wait for an answer: the connections are given up, the load told afresh. */
  readonly hurry: AbortSignal;
  readonly watch: RunWatcher;
  /** Told as soon as the record has its folder. */
  readonly recorded?: (folder: RunFolder) => void;
  /** Told how the bench was left, and waited for, before what the record shows is worked out. Never rejects. */
  readonly left?: (performed: Performed, folder: RunFolder) => Promise<void>;
}

/**
 * Opens the bench, makes the record, performs the plan and works out what it shows. Until the record's
 * folder and header are written and the watchman watches nothing is energised; whatever happens later, the
 * load ends off and what was read is kept.
 * @throws what opening an instrument and making the folder throw; a run that began never throws.
 */
export async function performPlan(
  loaded: LoadedPlan,
  world: World,
  options: PerformOptions,
): Promise<PlanPerformed> {
  const watchman = world.startWatchman?.();
  try {
    return await performWatched(loaded, world, options, watchman);
  } finally {
    await watchman?.dismiss();
  }
}

async function performWatched(
  loaded: LoadedPlan,
  world: World,
  options: PerformOptions,
  watchman: Watchman | undefined,
): Promise<PlanPerformed> {
  const { plan } = loaded;
  const from = loaded.resumed?.from;
  const early: JournalEvent[] = [];
  let append = (event: JournalEvent): void => {
    early.push(event);
  };
  const notice = (text: string): void => {
    options.watch.noticed(text);
    append({ event: 'notice', text });
  };
  const bench = await openForRun({
    bench: plan.bench,
    drivers: plan.drivers,
    ceilings: plan.ceilings,
    connect: world.connect,
    clock: world.clock,
    ...{ signal: options.signal, hurry: options.hurry },
    onInput: (state, confirmed) => {
      watchman?.input(state, confirmed);
      append({ event: 'input', state, confirmed });
    },
    onNotice: notice,
  });
  try {
    const { folder, journal } = await beginRecord(loaded, world, bench, options.runs);
    try {
      options.recorded?.(folder);
      append = (event) => {
        journal.append(event);
        options.watch.recorded(event);
      };
      early.forEach(append);
      if (loaded.resumed !== undefined) {
        instrumentsInWords(loaded.resumed.run, bench.instruments).forEach(notice);
      }
      await watchman?.take(
        { folder: resolve(folder.path), bench: plan.bench, driver: plan.drivers.load },
        notice,
      );
      // Without a watchman it ends before its first step, as a run that is stopped there.
      const signal =
        watchman === undefined ? options.signal : AbortSignal.any([options.signal, watchman.missing]);
      const performed = await perform({
        ...options,
        ...{ plan, bench, journal, clock: world.clock, from, signal },
      });
      await options.left?.(performed, folder);
      // What follows may keep us busy for so long that we would count as hung.
      await watchman?.dismiss();
      return { ...performed, folder, understood: await finish(folder, world.clock.wall()) };
    } finally {
      journal.close();
    }
  } finally {
    await bench.close();
  }
}

/** The folder, what was planned, and the first lines of the journal: without them nothing is begun. */
async function beginRecord(
  loaded: LoadedPlan,
  { clock }: World,
  bench: OpenBench,
  runs: string,
): Promise<{ readonly folder: RunFolder; readonly journal: JournalWriter }> {
  const { plan, resumed } = loaded;
  const began = clock.wall();
  try {
    const folder = makeRunFolder(runs, began, plan.underTest.name, plan.procedure.name);
    const header = writeHeader(folder, headerOf(loaded, bench, began));
    const journal = new JournalWriter(folder.journal, () => clock.now());
    journal.append({ event: 'opened', format: journalFormat, wallClock: began.toISOString(), header });
    for (const { post, instrument } of bench.instruments) {
      const { address, identity } = instrument;
      journal.append({ event: 'instrument', role: post, address, identity });
    }
    if (resumed !== undefined) goOnWith(resumed, journal);
    return { folder, journal };
  } catch (error) {
    throw await sayWhatIsOn(bench.load.instrument, error);
  }
}

/** What was done stands in this record too, so that it is whole by itself. */
function goOnWith({ run }: Resumption, journal: JournalWriter): void {
  copyDoneSteps(run, journal);
  for (const text of versionsInWords(run)) journal.append({ event: 'notice', text });
}

/** What can be made again from the journal must not turn a good run into a failed one. */
async function finish(folder: RunFolder, now: Date): Promise<PlanPerformed['understood']> {
  try {
    const result = understand(folder.path);
    return { kind: 'result', result, unkept: await keepResult(folder, result, now) };
  } catch (error) {
    return { kind: 'error', error };
  }
}

/** The journal is whole without them, so that they can't be written is told and fails nothing. */
async function keepResult(
  folder: RunFolder,
  result: Result,
  now: Date,
): Promise<RecordWriteError | undefined> {
  try {
    writeReadingsCsv(folder);
    replaceFile(folder.findings, jsonText(resultAsJson(result)));
  } catch (error) {
    if (error instanceof RecordWriteError) return error;
    throw error;
  }
  try {
    // Charts are loaded by whoever has something to draw.
    const { runPage } = await import('../report/run-page/run-page.js');
    replaceFile(folder.report, runPage(result, madeAt(now)));
    return undefined;
  } catch (error) {
    // Whatever is wrong with the page, what was measured is told.
    return error instanceof RecordWriteError ? error : new RecordWriteError(folder.report, error);
  }
}
