import { closeSync, existsSync, readSync } from 'node:fs';
import { fileReason } from '../errors/file-reason.js';
import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import { openRegular } from '../record/read-whole.js';
import { writeWhole } from './write-whole.js';

/** A sort of file that is written where the command line says. */
export interface KeptKind {
  /** `build sheet`. */
  readonly what: string;
  /** `a page`, whose name ends in `.html`. */
  readonly named: string;
  readonly ending: string;
  /** What stands near the top of each of them, and of no other file. */
  readonly mark: string;
  /** How it is asked for. */
  readonly example: string;
  /** Of the error that it can't be kept. */
  readonly code: string;
}

/** A file can't be kept where it was to be. */
export class FileNotKeptError extends RailproofError {
  readonly code;
  readonly exitCode;
  readonly path: string;

  constructor(path: string, kind: KeptKind, reason: 'bad-name' | 'not-ours' | 'unwritable', cause?: unknown) {
    const { what, named, ending, example } = kind;
    const words = {
      'bad-name': `a ${what} is ${named}, and its name ends in ${ending}`,
      'not-ours': `this file is there already and is no ${what}, so it is not written over`,
      unwritable: `the ${what} can't be written: ${fileReason(cause)}`,
    };
    const advice = {
      'bad-name': `name it, for example, ${example}`,
      'not-ours': `give another name, for example ${example}`,
      unwritable: `name a place where it may be written, for example ${example}`,
    };
    super(`${path}: ${words[reason]}`, { cause, advice: advice[reason] });
    this.code = kind.code;
    this.exitCode = reason === 'unwritable' ? exitCodes.inputOutput : exitCodes.usage;
    this.path = path;
  }
}

/** The mark stands near the top. */
const topOfFile = 4096;

/**
 * Looks where a file is to go, before anything is worked out in vain: an older one of its kind may be written
 * over, nothing else.
 * @throws FileNotKeptError
 */
export function checkKept(path: string, kind: KeptKind): void {
  if (!path.toLowerCase().endsWith(kind.ending)) throw new FileNotKeptError(path, kind, 'bad-name');
  if (existsSync(path) && !isOurs(path, kind)) throw new FileNotKeptError(path, kind, 'not-ours');
}

function isOurs(path: string, { mark }: KeptKind): boolean {
  try {
    const file = openRegular(path);
    try {
      const bytes = Buffer.alloc(topOfFile);
      return bytes.toString('utf8', 0, readSync(file, bytes, 0, topOfFile, 0)).includes(mark);
    } finally {
      closeSync(file);
    }
  } catch {
    return false;
  }
}

/** Writes it whole or not at all. @throws FileNotKeptError */
export async function writeKept(path: string, text: string, kind: KeptKind): Promise<void> {
  checkKept(path, kind);
  try {
    await writeWhole(path, text);
  } catch (error) {
    throw new FileNotKeptError(path, kind, 'unwritable', error);
  }
}
