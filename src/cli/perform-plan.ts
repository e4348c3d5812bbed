import { readFileSync } from 'node:fs';
import { type OpenBench, openBench } from '../bench/open-bench.js';
import type { Safety } from '../bench/make-safe.js';
import type { FileRead } from '../files/read-text.js';
import { JournalWriter } from '../record/journal-writer.js';
import { journalFormat, type JournalEvent } from '../record/journal-event.js';
import { writeReadingsCsv } from '../record/readings-csv.js';
import { makeRunFolder, replaceFile, type RunFolder, writeHeader } from '../record/run-folder.js';
import { headerFormat, type RunHeader } from '../record/run-header.js';
import { jsonText } from '../report/json-text.js';
import { resultAsJson } from '../report/json.js';
import type { Result } from '../report/result.js';
import { understand } from '../report/understand.js';
import { type Ending, perform, type RunWatcher } from '../run/perform.js';
import type { Operator } from '../steps/operator.js';
import type { LoadedPlan } from './load-plan.js';
import { recordedPath, type World } from './wiring.js';

export interface PlanPerformed {
  readonly folder: RunFolder;
  readonly ending: Ending;
  readonly safety: Safety;
  readonly result: Result;
}

/**
 * Opens the bench, makes the record, performs the plan and works out what it shows. Until the record's
 * folder and header are written nothing is energised; whatever happens later, the load ends off and what
 * was read is kept.
 * @throws what opening an instrument and making the folder throw; a run that began never throws.
 */
export async function performPlan(
  { plan, files }: LoadedPlan,
  world: World,
  options: {
    readonly runs: string;
    readonly operator: Operator;
    readonly signal: AbortSignal;
    readonly watch: RunWatcher;
  },
): Promise<PlanPerformed> {
  const early: JournalEvent[] = [];
  let append = (event: JournalEvent): void => {
    early.push(event);
  };
  const bench = await openBench({
    bench: plan.bench,
    drivers: plan.drivers,
    connect: world.connect,
    clock: world.clock,
    onInput: (state, confirmed) => {
      append({ event: 'input', state, confirmed });
    },
    onNotice: (text) => {
      append({ event: 'notice', text });
    },
  });
  try {
    const began = world.clock.wall();
    const folder = makeRunFolder(options.runs, began, plan.module.name, plan.procedure.name);
    writeHeader(folder, headerOf({ plan, files }, bench, began));
    const journal = new JournalWriter(folder.journal, () => world.clock.now());
    try {
      append = (event) => {
        journal.append(event);
      };
      append({ event: 'opened', format: journalFormat, wallClock: began.toISOString() });
      for (const { role, address, identity } of bench.instruments) {
        append({ event: 'instrument', role, address, identity });
      }
      early.forEach(append);
      const { ending, safety } = await perform({ plan, bench, journal, clock: world.clock, ...options });
      return { folder, ending, safety, result: finish(folder) };
    } finally {
      journal.close();
    }
  } finally {
    await bench.close();
  }
}

/** What can be made again from the journal must not turn a good run into a failed one. */
function finish(folder: RunFolder): Result {
  const result = understand(folder.path);
  try {
    writeReadingsCsv(folder);
    replaceFile(folder.findings, jsonText(resultAsJson(result)));
  } catch {
    // The journal is whole; `railproof analyse` shows the same, and says where it can't write.
  }
  return result;
}

function headerOf({ plan, files }: LoadedPlan, bench: OpenBench, began: Date): RunHeader {
  const { procedure } = plan;
  return {
    format: headerFormat,
    program: program(),
    began: began.toISOString(),
    modules: plan.modules.map((module) => ({
      ...module,
      rated: { ...module.rated },
      changes: [...module.changes],
    })),
    bench: {
      name: plan.bench.name,
      leads: plan.bench.leads,
      voltageFrom: plan.bench.voltageFrom,
      simulated: plan.bench.simulation !== undefined,
    },
    procedure: { name: procedure.name, title: procedure.title, cautions: [...procedure.cautions] },
    steps: plan.steps.map(({ kind, summary, parameters }) => ({
      kind: kind.kind,
      summary,
      settings: parameters as Record<string, unknown>,
    })),
    criteria: procedure.criteria.map(({ finding, requirement }) => ({ finding, requirement })),
    derating: procedure.derating,
    instruments: bench.instruments.map(({ role, driver, address, identity }) => ({
      role,
      driver: driver.name,
      address,
      identity,
      accuracy: driver.accuracy,
      ratings: driver.ratings,
    })),
    files: [
      fileOf('procedure', files.procedure),
      fileOf('bench', files.bench),
      ...files.modules.map((module) => fileOf('module', module)),
      fileOf('driver', files.drivers.load),
      ...(files.drivers.meter === undefined ? [] : [fileOf('driver', files.drivers.meter)]),
    ],
  };
}

function fileOf(kind: string, { path, sha256, text }: FileRead<unknown>): RunHeader['files'][number] {
  return { kind, path: recordedPath(path), sha256, text };
}

function program(): RunHeader['program'] {
  const text = readFileSync(new URL('../../package.json', import.meta.url), 'utf8');
  const { name, version } = JSON.parse(text) as { name: string; version: string };
  return { name, version };
}
