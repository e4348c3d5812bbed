import { accessSync, constants, statSync } from 'node:fs';
import { writeFile } from 'node:fs/promises';
import { dirname } from 'node:path';
import { fileReason } from '../errors/file-reason.js';
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
    super(`${path}: the file can't be written: ${fileReason(cause)}`, {
      cause,
      advice: 'make room there, or go to a folder where you may write, and begin again',
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

/**
 * Looks whether a file may be written into that folder, before anything is asked in vain.
 * @throws NewNotKeptError
 */
export function checkWritable(path: string): void {
  try {
    accessSync(dirname(path), constants.W_OK);
  } catch (error) {
    throw new NewNotKeptError(path, error);
  }
}

/** Where the file goes; one that is there is written over only where that is wanted. @throws NothingWrittenError */
export async function settledPlace(path: string, questions: Questions): Promise<NewPlace> {
  const there = statSync(path, { throwIfNoEntry: false });
  if (there === undefined) return { path, isThere: false };
  if (!there.isFile()) {
    questions.say(`\n${printable(path)} is there already, and is no file that could be written over.`);
    return settledPlace(await askOther(questions), questions);
  }
  const over = await questions.yes(
    {
      ask: `${printable(path)} is there already. Write over it?`,
      why: 'What it holds would be lost. With no, another name is asked for.',
    },
    false,
  );
  if (over) return { path, isThere: true };
  return settledPlace(await askOther(questions), questions);
}

function askOther(questions: Questions): Promise<string> {
  return questions.ask({
    ask: 'Into which file, then?',
    why: 'Its name ends in .yaml.',
    read: (answer) => {
      const problem = placeProblem(answer);
      if (problem !== undefined) throw new UnfitAnswerError(problem);
      checkWritable(answer);
      return answer;
    },
  });
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
