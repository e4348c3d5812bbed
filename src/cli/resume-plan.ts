import { createHash } from 'node:crypto';
import { dirname, join } from 'node:path';
import { isDeepStrictEqual } from 'node:util';
import { type Bench, placeOf, type Post, postsOf, roleOf } from '../files/bench.js';
import { driversOfChannels } from '../files/bench-channels.js';
import type { Driver } from '../files/driver.js';
import { besideBench, parseBench, readBench } from '../files/read-bench.js';
import { parseDriver } from '../files/read-driver.js';
import { parseModule } from '../files/read-module.js';
import { parseProcedure } from '../files/read-procedure.js';
import type { FileRead } from '../files/read-text.js';
import { parseTolerance } from '../files/read-tolerance.js';
import { BadRecordError } from '../record/record-error.js';
import { readUnfinished, type UnfinishedRun } from '../record/resume.js';
import { NotResumableError } from '../record/resume-error.js';
import type { RunHeader } from '../record/run-header.js';
import { makePlan, type Plan } from '../run/plan.js';
import { parseCarried, type TakenOver } from '../run/taken-over.js';
import { stepKinds } from '../steps/index.js';
import { WrongRoleError } from './bench-driver.js';
import { stepsOf } from './header-of.js';
import type { LoadedPlan } from './load-plan.js';
import { requireSameBench } from './resume-bench.js';
import { standingFor } from './resume-shown.js';
import { type DriverFiles, planDrivers } from './bench-drivers.js';
import { vocabulary } from './vocabulary.js';

/** What a run that goes on takes over. */
export interface Resumption {
  readonly run: UnfinishedRun;
  readonly from: TakenOver;
}

export interface ResumedPlan extends LoadedPlan {
  readonly resumed: Resumption;
}

/**
 * The plan of a run that was broken off, made again from what its record holds, so that what continues is
 * what was planned, whatever became of the files meanwhile. Only a bench may be given, at other addresses.
 * @throws NoRecordError, BadRecordError, NotResumableError
 * @throws BadFileError, PlanError where this version does not take what an earlier one took
 * @throws MissingFileError, OtherBenchError of a bench that is given
 */
export async function loadResumed(wanted: {
  readonly run: string;
  readonly bench: string | undefined;
}): Promise<ResumedPlan> {
  const run = readUnfinished(wanted.run);
  const texts = new RecordedTexts(run);
  const procedure = texts.one('procedure', (text, name) => parseProcedure(text, name, vocabulary));
  const [first, ...others] = texts.all('module', parseModule);
  if (first === undefined) throw texts.lacks('a module');
  const recordedBench = texts.one('bench', (text, name, path) =>
    besideBench(parseBench(text, name), dirname(path)),
  );
  const bench =
    wanted.bench === undefined ? recordedBench : await otherAddresses(wanted.bench, recordedBench.value);
  const drivers = driversOfChannels(bench, driversOf(bench.value, texts));
  const plan = makePlan(
    procedure.value,
    [first.value, ...others.map(({ value }) => value)],
    bench.value,
    planDrivers(drivers),
    stepKinds,
  );
  requireSameSteps(plan, run);
  const { baseline } = run.header;
  return {
    plan,
    files: { procedure, bench, modules: [first, ...others], drivers },
    ...(baseline === undefined
      ? {}
      : {
          baseline: {
            baseline,
            tolerance: texts.one('tolerance', (text, name) => parseTolerance(text, name, vocabulary)),
          },
        }),
    resumed: { run, from: takenOver(run) },
  };
}

async function otherAddresses(path: string, recorded: Bench): Promise<FileRead<Bench>> {
  const bench = await readBench(path);
  requireSameBench(bench.value, path, recorded);
  return bench;
}

/** In the order in which a record lists them, which is that of the posts. */
function driversOf(bench: Bench, texts: RecordedTexts): DriverFiles {
  const posts = postsOf(bench);
  const files = texts.all('driver', parseDriver);
  if (files.length !== posts.length) throw texts.lacks('the driver of each instrument');
  return posts.map(([post], index) => ({ post, file: inRole(files[index], post, texts) }));
}

function inRole(file: FileRead<Driver> | undefined, post: Post, texts: RecordedTexts): FileRead<Driver> {
  if (file === undefined) throw texts.lacks(`the driver of the ${post}`);
  if (file.value.role !== roleOf(post))
    throw new WrongRoleError(`${texts.path}: ${placeOf(post).join('.')}`, post, file.value);
  return file;
}

/** Steps that are done and steps to come go by the same settings, or the findings mix two procedures. */
function requireSameSteps(plan: Plan, { folder, header }: UnfinishedRun): void {
  const planned: unknown = JSON.parse(JSON.stringify(stepsOf(plan)));
  const settings = (steps: RunHeader['steps']): unknown =>
    steps.map(({ kind, settings }) => ({ kind, settings }));
  if (isDeepStrictEqual(settings(planned as RunHeader['steps']), settings(header.steps))) return;
  throw new NotResumableError(
    folder.path,
    `this version makes other steps of its procedure than ${header.program.name} ${header.program.version} did`,
    'go on with the version that began it, or run it afresh',
  );
}

function takenOver(run: UnfinishedRun): TakenOver {
  try {
    return { ...parseCarried(run.carried), steps: run.done.length, standing: standingFor(run) };
  } catch (error) {
    if (error instanceof RangeError) throw new BadRecordError(run.folder.journal, error.message);
    throw error;
  }
}

/** The input files as a record holds them. */
class RecordedTexts {
  /** Of run.json. */
  readonly path: string;
  readonly #files: RunHeader['files'];

  constructor({ folder, header }: UnfinishedRun) {
    this.path = join(folder.path, 'run.json');
    this.#files = header.files;
  }

  /** `parse` is given the text, the name by which messages call it, and its path in those days. */
  all<T>(kind: string, parse: (text: string, name: string, path: string) => T): readonly FileRead<T>[] {
    return this.#files
      .filter((file) => file.kind === kind)
      .map(({ path, sha256, text }) => {
        if (createHash('sha256').update(text).digest('hex') !== sha256)
          throw new BadRecordError(this.path, `the text of ${path} is not the one that was read then`);
        return { value: parse(text, `${this.path}: ${path}`, path), text, path };
      });
  }

  one<T>(kind: string, parse: (text: string, name: string, path: string) => T): FileRead<T> {
    const [file] = this.all(kind, parse);
    if (file === undefined) throw this.lacks(`a ${kind}`);
    return file;
  }

  lacks(what: string): BadRecordError {
    return new BadRecordError(this.path, `it does not hold ${what}`);
  }
}
