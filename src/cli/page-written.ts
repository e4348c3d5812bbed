import { closeSync, existsSync, readSync } from 'node:fs';
import { rename, rm, writeFile } from 'node:fs/promises';
import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import { openRegular } from '../record/read-whole.js';
import { type PageKind, pageMark } from '../report/page/page.js';

/** What is asked for on the command line, with the option that says where the page goes. */
const asked: Readonly<Record<PageKind, { readonly code: string; readonly example: string }>> = {
  'build sheet': { code: 'SHEET_NOT_KEPT', example: '--sheet sheet.html' },
  report: { code: 'REPORT_NOT_KEPT', example: '--to report.html' },
  comparison: { code: 'COMPARISON_NOT_KEPT', example: '--page comparison.html' },
};

/** A page can't be kept where it was to be. */
export class PageNotKeptError extends RailproofError {
  readonly code;
  readonly exitCode;
  readonly path: string;

  constructor(path: string, kind: PageKind, reason: 'bad-name' | 'not-ours' | 'unwritable', cause?: unknown) {
    const { code, example } = asked[kind];
    const words = {
      'bad-name': `a ${kind} is a page, and its name ends in .html`,
      'not-ours': `this file is there already and is no ${kind}, so it is not written over`,
      unwritable: `the ${kind} can't be written: ${cause instanceof Error ? cause.message : String(cause)}`,
    };
    const advice = {
      'bad-name': `name it, for example, ${example}`,
      'not-ours': `give another name, for example ${example}`,
      unwritable: `name a place where it may be written, for example ${example}`,
    };
    super(`${path}: ${words[reason]}`, { cause, advice: advice[reason] });
    this.code = code;
    this.exitCode = reason === 'unwritable' ? exitCodes.inputOutput : exitCodes.usage;
    this.path = path;
  }
}

/** The mark stands near the top of every page. */
const topOfPage = 4096;

/**
 * Looks where a page is to go, before anything is worked out in vain: an older one of its kind may be written
 * over, nothing else.
 * @throws PageNotKeptError
 */
export function checkPage(path: string, kind: PageKind): void {
  if (!/\.html$/i.test(path)) throw new PageNotKeptError(path, kind, 'bad-name');
  if (existsSync(path) && !isPage(path, kind)) throw new PageNotKeptError(path, kind, 'not-ours');
}

function isPage(path: string, kind: PageKind): boolean {
  try {
    const file = openRegular(path);
    try {
      const bytes = Buffer.alloc(topOfPage);
      return bytes.toString('utf8', 0, readSync(file, bytes, 0, topOfPage, 0)).includes(pageMark(kind));
    } finally {
      closeSync(file);
    }
  } catch {
    return false;
  }
}

/** Writes it whole or not at all. @throws PageNotKeptError */
export async function writePage(path: string, page: string, kind: PageKind): Promise<void> {
  checkPage(path, kind);
  const beside = `${path}.${process.pid}.part`;
  try {
    await writeFile(beside, page, { flag: 'wx' });
    await rename(beside, path);
  } catch (error) {
    // Where it can't be taken away it was not written either.
    await rm(beside, { force: true }).catch(() => undefined);
    throw new PageNotKeptError(path, kind, 'unwritable', error);
  }
}
