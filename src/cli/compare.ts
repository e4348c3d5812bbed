import { realClock } from '../clock/real-clock.js';
import { type ExitCode, exitCodes, RailproofError } from '../errors/railproof-error.js';
import { compare } from '../judgement/compare.js';
import type { Side } from '../judgement/compare.js';
import { printable } from '../quantity/printable.js';
import { comparisonAsJson } from '../report/comparison-json.js';
import { comparisonAsText } from '../report/comparison-text.js';
import { type ComparedRecords, outcomeOf } from '../report/comparison.js';
import { jsonText } from '../report/json-text.js';
import { comparisonSuite } from '../report/junit/comparison-suite.js';
import type { Result } from '../report/result.js';
import { styleFor } from '../report/style.js';
import { understand } from '../report/understand.js';
import { findTolerance } from './baseline.js';
import { statusOfOutcome } from './exit-status.js';
import { placeForJunit } from './junit-written.js';
import { madeAt } from './made-at.js';
import { showFile } from './open-file.js';
import { checkPage, writePage } from './page-written.js';
import { say, show } from './say.js';
import type { Streams } from './streams.js';

/** What may stand behind `railproof compare`. */
export interface CompareOptions {
  readonly tolerance: string;
  readonly json?: boolean;
  /** Where the decisions go as JUnit XML. */
  readonly junit?: string;
  /** Where the page goes. */
  readonly page?: string;
  /** Show it when it is written. */
  readonly open?: boolean;
}

/** A page that is to be shown and is nowhere to be written. */
export class NoPageError extends RailproofError {
  readonly code = 'NO_PAGE';
  readonly exitCode = exitCodes.usage;

  constructor() {
    super('railproof compare: there is an --open and no page that could be shown', {
      advice: 'say where the page goes: --page comparison.html --open',
    });
  }
}

/** `railproof compare`: two records side by side; the exit status says whether all is as it should be. */
export async function compareRecords(
  wanted: CompareOptions & { readonly earlier: string; readonly later: string },
  streams: Streams,
): Promise<ExitCode> {
  const keepJunit = await placeForJunit(wanted.junit);
  checkPlaceOfPage(wanted);
  const { value: tolerance } = await findTolerance(wanted.tolerance);
  const [before, after] = [understand(wanted.earlier), understand(wanted.later)];
  const comparison = compare(sideOf(before), sideOf(after), tolerance.findings);
  const records: ComparedRecords = { before, after, tolerance, comparison };
  await keepJunit(() => comparisonSuite(records));
  const { stdout, environment } = streams;
  if (wanted.json === true) stdout.write(jsonText(comparisonAsJson(records)));
  else show(stdout, comparisonAsText(records, styleFor(stdout, environment), stdout.columns));
  await keepPage(records, wanted, streams);
  return statusOfOutcome(outcomeOf(records));
}

/** @throws NoPageError, FileNotKeptError */
function checkPlaceOfPage({ page, open = false }: CompareOptions): void {
  if (page !== undefined) checkPage(page, 'comparison');
  else if (open) throw new NoPageError();
}

async function keepPage(
  records: ComparedRecords,
  { page, open = false }: CompareOptions,
  streams: Streams,
): Promise<void> {
  if (page === undefined) return;
  const { comparisonPage } = await import('../report/comparison-page/comparison-page.js');
  await writePage(page, comparisonPage(records, madeAt(realClock.wall())), 'comparison');
  say(streams.stderr, `Comparison: ${printable(page)}`);
  if (open) await showFile(page, streams);
}

function sideOf({ header, findings }: Result): Side {
  return { modules: header.modules.map(({ name }) => name), findings };
}
