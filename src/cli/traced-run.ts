import { mkdirSync } from 'node:fs';
import { EventClock } from '../clock/event-clock.js';
import { postsOf } from '../files/bench.js';
import { asReplayed } from '../files/live-bench.js';
import { tracedConnect } from '../instrument/traced-connection.js';
import { printable } from '../quantity/printable.js';
import { makeRunFolder, type RunFolder } from '../record/run-folder.js';
import { tracedOperator } from '../run/traced-operator.js';
import type { Operator } from '../steps/operator.js';
import type { LoadedPlan } from './load-plan.js';
import { quoted } from './quoted.js';
import { TraceFiles } from './trace-files.js';
import type { World } from './wiring.js';

/** A run whose every byte is noted, with the clock that such a run must go by. */
export interface TracedRun {
  readonly world: World;
  readonly operator: Operator;
  readonly files: TraceFiles;
}

export function tracedRun(world: World, operator: Operator, tell: (text: string) => void): TracedRun {
  const clock = new EventClock(world.clock);
  const files = new TraceFiles(tell);
  return {
    world: { ...world, clock, connect: tracedConnect(world.connect, clock, files.of) },
    operator: tracedOperator(operator, clock, files.answer),
    files,
  };
}

/**
 * All that a replay needs beside the recordings: the bench with its instruments replayed, and, of a run from the
 * beginning, what it was planned from. A run that goes on with another one needs the record of that one.
 */
function besideTrace({ plan, files, resumed }: LoadedPlan): Readonly<Record<string, string>> {
  const posts = postsOf(plan.bench).map(([post]) => post);
  const afresh = resumed === undefined;
  const bench = { 'replay.yaml': asReplayed(files.bench.text, posts, afresh) };
  if (!afresh) return bench;
  return {
    ...bench,
    'procedure.yaml': files.procedure.text,
    ...Object.fromEntries(files.modules.map(({ text, value }) => [moduleFile(value.name), text])),
    ...Object.fromEntries(files.drivers.map(({ post, file }) => [`driver-${post}.yaml`, file.text])),
  };
}

/** Puts it with the record. Never throws. */
export function keepWith({ trace }: RunFolder, files: TraceFiles, loaded: LoadedPlan): void {
  const make = (): string => {
    mkdirSync(trace);
    return trace;
  };
  files.keepIn(make, () => besideTrace(loaded));
}

/**
 * Where the bench could not be opened there is no record, and the trace stands alone among the others.
 * Never throws: why the run did not begin matters more.
 */
export function keepAlone(files: TraceFiles, loaded: LoadedPlan, runs: string, began: Date): void {
  const { underTest, procedure } = loaded.plan;
  files.keepIn(
    () => makeRunFolder(runs, began, underTest.name, `${procedure.name}-not-begun`).path,
    () => besideTrace(loaded),
  );
}

/** How it is played back, a line or two. */
export function replayHint({ plan, resumed }: LoadedPlan, folder: string): string {
  const at = (name: string): string => quoted(`${folder}/${name}`);
  const what =
    resumed === undefined
      ? [at('procedure.yaml'), '--module', ...plan.underTest.modules.map(({ name }) => at(moduleFile(name)))]
      : ['--resume', quoted(resumed.run.folder.path)];
  const command = ['railproof run', ...what, '--bench', at('replay.yaml')].join(' ');
  return `trace: ${printable(folder)}\n\`${printable(command)}\` plays it back.\n`;
}

function moduleFile(name: string): string {
  return `module-${name}.yaml`;
}
