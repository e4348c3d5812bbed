import { statSync } from 'node:fs';
import { writeFile } from 'node:fs/promises';
import { dirname } from 'node:path';
import { messageOf } from '../errors/message-of.js';
import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import { printable } from '../quantity/printable.js';
import { type Questions, UnfitAnswerError } from './questions.js';
import { writeWhole } from './write-whole.js';

/** The file can't be written where it was to go. */
export class NewNotKeptError extends RailproofError {
  readonly code = 'NEW_NOT_KEPT';
  readonly exitCode = exitCodes.inputOutput;
  readonly path: string;

  constructor(path: string, cause: unknown) {
    super(`${path}: the file can't be written: ${messageOf(cause)}`, {
      cause,
      advice:
        'name a place where it may be written, for example railproof new bench bench.yaml, and answer again',
    });
    this.path = path;
  }
}

export interface NewPlace {
  readonly path: string;
  /** Something is there, and may be written over. */
  readonly isThere: boolean;
}

/** Why no file of ours can go there; undefined where one can. */
export function placeProblem(path: string): string | undefined {
  if (!/\.ya?ml$/i.test(path)) return `${printable(path)}: the name of such a file ends in .yaml`;
  const folder = statSync(dirname(path), { throwIfNoEntry: false });
  if (folder?.isDirectory() !== true)
    return `${printable(path)}: there is no folder ${printable(dirname(path))}`;
  const there = statSync(path, { throwIfNoEntry: false });
  if (there !== undefined && !there.isFile())
    return `${printable(path)}: this is no file, and can't be written over`;
  return undefined;
}

/** Where the file goes; one that is there is written over only where that is wanted. @throws NothingWrittenError */
export async function settledPlace(path: string, questions: Questions): Promise<NewPlace> {
  if (statSync(path, { throwIfNoEntry: false }) === undefined) return { path, isThere: false };
  const over = await questions.yes(
    {
      ask: `${printable(path)} is there already. Write over it?`,
      why: 'What it holds would be lost. With no, another name is asked for.',
    },
    false,
  );
  if (over) return { path, isThere: true };
  const other = await questions.ask({
    ask: 'Into which file, then?',
    why: 'Its name ends in .yaml.',
    read: (answer) => {
      const problem = placeProblem(answer);
      if (problem === undefined) return answer;
      throw new UnfitAnswerError(problem);
    },
  });
  return settledPlace(other, questions);
}

/** Whole or not at all; over another file only where that was wanted. @throws NewNotKeptError */
export async function writeNew({ path, isThere }: NewPlace, text: string): Promise<void> {
  try {
    if (isThere) await writeWhole(path, text);
    else await writeFile(path, text, { flag: 'wx' });
  } catch (error) {
    throw new NewNotKeptError(path, error);
  }
}
