import { existsSync } from 'node:fs';
import { basename } from 'node:path';
import { realClock } from '../clock/real-clock.js';
import { exitCodes, type ExitCode, RailproofError } from '../errors/railproof-error.js';
import { formatAddress } from '../files/connection-address.js';
import { namePattern } from '../files/name-pattern.js';
import { benchText, type NewBench } from '../files/new-bench.js';
import { moduleText } from '../files/new-module.js';
import { didYouMean } from '../quantity/nearest.js';
import { printable } from '../quantity/printable.js';
import { check } from './check.js';
import { askBench } from './new-bench.js';
import { askModule } from './new-module.js';
import { checkWritable, type NewPlace, placeProblem, settledPlace, writeNew } from './new-place.js';
import { askProcedure } from './new-procedure.js';
import { Questions } from './questions.js';
import { quoted } from './quoted.js';
import type { Streams } from './streams.js';

/** What can be begun anew, with the name of such a file. */
const kinds = { bench: 'bench.yaml', module: 'K1.yaml', procedure: 'pump-line.yaml' } as const;
type NewKind = keyof typeof kinds;
export const newKinds = Object.keys(kinds) as readonly NewKind[];

/** What stands in for the answers of somebody who isn't there. */
const shippedExamples: Readonly<Record<NewKind, string>> = {
  bench: 'fixtures/benches/nursery.yaml',
  module: 'fixtures/modules/K1.yaml',
  procedure: 'procedures/real-limit.yaml',
};

/** Something that `railproof new` can't begin with. */
export class NewUsageError extends RailproofError {
  readonly code = 'NEW_USAGE';
  readonly exitCode = exitCodes.usage;
}

interface Made {
  readonly place: NewPlace;
  readonly text: string;
  /** The commands that are typed next. */
  readonly next: readonly string[];
}

/**
 * `railproof new`: asks a few questions at the terminal and writes a commented file, which is then checked. Nothing is
 * written before the last answer.
 * @throws NewUsageError, NewNotKeptError, NothingWrittenError
 */
export async function newFile(
  wanted: { readonly kind: string; readonly file?: string | undefined },
  streams: Streams,
): Promise<ExitCode> {
  const kind = kindOf(wanted.kind);
  const problem = wanted.file === undefined ? undefined : placeProblem(wanted.file);
  if (problem !== undefined)
    throw new NewUsageError(problem, { advice: `for example: railproof new ${kind} ${kinds[kind]}` });
  if (!streams.stdin.isTTY || !streams.stderr.isTTY) throw nobodyThere(kind);
  checkWritable(wanted.file ?? kinds[kind]);
  const questions = new Questions(streams);
  try {
    questions.say(
      `A ${kind} file, by a few questions. Ctrl-C ends this at any time, and then nothing is written.`,
    );
    const { place, text, next } = await make(kind, wanted.file, questions);
    await writeNew(place, text);
    questions.say('');
    const status = await check([place.path], streams);
    streams.stdout.write(`Next:\n${next.map((command) => `  ${command}\n`).join('')}`);
    return status;
  } finally {
    questions.close();
  }
}

function kindOf(text: string): NewKind {
  if (Object.hasOwn(kinds, text)) return text as NewKind;
  const names = Object.keys(kinds);
  throw new NewUsageError(
    `"${printable(text)}" is no kind of file that can be begun here${didYouMean(text, names)}`,
    {
      advice: `there are ${names.map((name) => `\`railproof new ${name}\``).join(', ')}`,
    },
  );
}

function nobodyThere(kind: NewKind): NewUsageError {
  return new NewUsageError('this asks questions, and nobody is at a terminal to answer them', {
    advice:
      `run it in a terminal; or copy ${shippedExamples[kind]} of the package, change it, and have ` +
      `\`railproof check ${kinds[kind]}\` look whether it is right`,
  });
}

async function make(kind: NewKind, file: string | undefined, questions: Questions): Promise<Made> {
  const stem = basename(file ?? '').replace(/\.ya?ml$/i, '');
  const called = namePattern.test(stem) ? stem : undefined;
  const given = file === undefined ? undefined : await settledPlace(file, questions);
  switch (kind) {
    case 'bench': {
      const place = given ?? (await settledPlace(kinds.bench, questions));
      const bench = await askBench(questions, place.path, called ?? 'bench');
      return { place, text: benchText(bench), next: afterBench(bench, quoted(place.path)) };
    }
    case 'module': {
      const module = await askModule(questions, today(), called);
      const place = given ?? (await settledPlace(`${module.name}.yaml`, questions));
      const look = `railproof run quick-look --bench bench.yaml --module ${quoted(place.path)} --dry-run`;
      const next = [...(existsSync(kinds.bench) ? [] : ['railproof new bench']), look];
      return { place, text: moduleText(module), next };
    }
    case 'procedure': {
      const { name, text, modules } = await askProcedure(questions, called);
      const place = given ?? (await settledPlace(`${name}.yaml`, questions));
      const under = modules === 1 ? '--module K1.yaml' : '--module K1.yaml --module K2.yaml';
      return {
        ...{ place, text },
        next: [`railproof run ${quoted(place.path)} --bench bench.yaml ${under} --dry-run`],
      };
    }
  }
}

function afterBench({ instruments, tries }: NewBench, path: string): string[] {
  const name = tries?.name ?? 'K1';
  const { load } = instruments;
  const channel = load.channel === undefined ? '' : ` --channel ${load.channel}`;
  const trial = `railproof drivers --try ${load.driver} --connection ${quoted(formatAddress(load.connection))}${channel}`;
  return [
    // A driver of one's own is named from the folder of the bench on.
    ...(tries === undefined && !/[/\\]|\.ya?ml$/i.test(load.driver) ? [trial] : []),
    ...(existsSync(`${name}.yaml`) ? [] : [`railproof new module ${name}.yaml`]),
    `railproof run quick-look --bench ${path} --module ${name}.yaml --dry-run`,
    `railproof run quick-look --bench ${path} --module ${name}.yaml`,
  ];
}

/** By the calendar of whoever is asked. */
function today(): string {
  const now = realClock.wall();
  const two = (part: number): string => String(part).padStart(2, '0');
  return `${now.getFullYear()}-${two(now.getMonth() + 1)}-${two(now.getDate())}`;
}
