import { type PageKind, pageMark } from '../report/page/page.js';
import { checkKept, type KeptKind, writeKept } from './kept-file.js';

/** What is asked for on the command line, with the option that says where the page goes. */
const asked: Readonly<Record<PageKind, { readonly code: string; readonly example: string }>> = {
  'build sheet': { code: 'SHEET_NOT_KEPT', example: '--sheet sheet.html' },
  report: { code: 'REPORT_NOT_KEPT', example: '--to report.html' },
  comparison: { code: 'COMPARISON_NOT_KEPT', example: '--page comparison.html' },
};

function kindOf(page: PageKind): KeptKind {
  return { what: page, named: 'a page', ending: '.html', mark: pageMark(page), ...asked[page] };
}

/**
 * Looks where a page is to go, before anything is worked out in vain: an older one of its kind may be written
 * over, nothing else.
 * @throws FileNotKeptError
 */
export function checkPage(path: string, kind: PageKind): void {
  checkKept(path, kindOf(kind));
}

/** Writes it whole or not at all. @throws FileNotKeptError */
export async function writePage(path: string, page: string, kind: PageKind): Promise<void> {
  await writeKept(path, page, kindOf(kind));
}
