import type { ExitCode } from '../errors/railproof-error.js';
import { compare } from '../judgement/compare.js';
import type { Side } from '../judgement/compare.js';
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
import { show } from './say.js';
import { placeForJunit } from './junit-written.js';
import type { Streams } from './streams.js';

/** What may stand behind `railproof compare`. */
export interface CompareOptions {
  readonly tolerance: string;
  readonly json?: boolean;
  /** Where the decisions go as JUnit XML. */
  readonly junit?: string;
}

/** `railproof compare`: two records side by side; the exit status says whether all is as it should be. */
export async function compareRecords(
  wanted: CompareOptions & { readonly earlier: string; readonly later: string },
  streams: Streams,
): Promise<ExitCode> {
  const keepJunit = await placeForJunit(wanted.junit);
  const { value: tolerance } = await findTolerance(wanted.tolerance);
  const [before, after] = [understand(wanted.earlier), understand(wanted.later)];
  const comparison = compare(sideOf(before), sideOf(after), tolerance.findings);
  const records: ComparedRecords = { before, after, tolerance, comparison };
  await keepJunit(() => comparisonSuite(records));
  const { stdout, environment } = streams;
  if (wanted.json === true) stdout.write(jsonText(comparisonAsJson(records)));
  else show(stdout, comparisonAsText(records, styleFor(stdout, environment), stdout.columns));
  return statusOfOutcome(outcomeOf(records));
}

function sideOf({ header, findings }: Result): Side {
  return { modules: header.modules.map(({ name }) => name), findings };
}
