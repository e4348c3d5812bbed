import type { ExitCode } from '../errors/railproof-error.js';
import { compare } from '../judgement/compare.js';
import type { Side } from '../judgement/compare.js';
import { comparisonAsJson } from '../report/comparison-json.js';
import { comparisonAsText } from '../report/comparison-text.js';
import { type ComparedRecords, outcomeOf } from '../report/comparison.js';
import { jsonText } from '../report/json-text.js';
import type { Result } from '../report/result.js';
import { styleFor } from '../report/style.js';
import { understand } from '../report/understand.js';
import { findTolerance } from './baseline.js';
import { statusOfOutcome } from './exit-status.js';
import type { Streams } from './streams.js';

/** `railproof compare`: two records side by side; the exit status says whether all is as it should be. */
export async function compareRecords(
  wanted: {
    readonly earlier: string;
    readonly later: string;
    readonly tolerance: string;
    readonly json?: boolean;
  },
  streams: Streams,
): Promise<ExitCode> {
  const { value: tolerance } = await findTolerance(wanted.tolerance);
  const [before, after] = [understand(wanted.earlier), understand(wanted.later)];
  const comparison = compare(sideOf(before), sideOf(after), tolerance.findings);
  const records: ComparedRecords = { before, after, tolerance, comparison };
  streams.stdout.write(
    wanted.json === true
      ? jsonText(comparisonAsJson(records))
      : comparisonAsText(records, styleFor(streams.stdout, streams.environment)),
  );
  return statusOfOutcome(outcomeOf(records));
}

function sideOf({ header, findings }: Result): Side {
  return { modules: header.modules.map(({ name }) => name), findings };
}
