import { closeSync, existsSync, readSync } from 'node:fs';
import { rename, rm, writeFile } from 'node:fs/promises';
import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import { openRegular } from '../record/read-whole.js';
import { pageMark } from '../report/page/page.js';

/** A build sheet can't be kept where it was to be. */
export class SheetNotKeptError extends RailproofError {
  readonly code = 'SHEET_NOT_KEPT';
  readonly exitCode;
  readonly path: string;

  constructor(path: string, reason: 'bad-name' | 'not-ours' | 'unwritable', cause?: unknown) {
    const words = {
      'bad-name': 'a build sheet is a page, and its name ends in .html',
      'not-ours': 'this file is there already and is no build sheet, so it is not written over',
      unwritable: `the build sheet can't be written: ${cause instanceof Error ? cause.message : String(cause)}`,
    };
    const advice = {
      'bad-name': 'name it, for example, --sheet sheet.html',
      'not-ours': 'give another name',
      unwritable: 'name a place where it may be written',
    };
    super(`${path}: ${words[reason]}`, { cause, advice: advice[reason] });
    this.exitCode = reason === 'unwritable' ? exitCodes.inputOutput : exitCodes.usage;
    this.path = path;
  }
}

/** The mark stands near the top of every page. */
const topOfPage = 4096;

/**
 * Looks where a build sheet is to go, before anything is worked out in vain: an older sheet may be written over,
 * nothing else.
 * @throws SheetNotKeptError
 */
export function checkSheet(path: string): void {
  if (!/\.html$/i.test(path)) throw new SheetNotKeptError(path, 'bad-name');
  if (existsSync(path) && !isSheet(path)) throw new SheetNotKeptError(path, 'not-ours');
}

function isSheet(path: string): boolean {
  try {
    const file = openRegular(path);
    try {
      const bytes = Buffer.alloc(topOfPage);
      return bytes.toString('utf8', 0, readSync(file, bytes, 0, topOfPage, 0)).includes(pageMark);
    } finally {
      closeSync(file);
    }
  } catch {
    return false;
  }
}

/** Writes it whole or not at all. @throws SheetNotKeptError */
export async function writeSheet(path: string, page: string): Promise<void> {
  checkSheet(path);
  const beside = `${path}.${process.pid}.part`;
  try {
    await writeFile(beside, page, { flag: 'wx' });
    await rename(beside, path);
  } catch (error) {
    // Where it can't be taken away it was not written either.
    await rm(beside, { force: true }).catch(() => undefined);
    throw new SheetNotKeptError(path, 'unwritable', error);
  }
}
