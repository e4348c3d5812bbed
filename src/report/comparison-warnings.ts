import type { ComparedRecords } from './comparison.js';
import { modulesListed } from './record-heading.js';
import { endedHow, type Result } from './result.js';
import { sharedSteps } from './shared-steps.js';
import type { Warning } from './warnings.js';

/** What must be known before two records are believed side by side: whose they are, whether they are whole, and two. */
export function comparisonWarnings({ before, after, comparison }: ComparedRecords): readonly Warning[] {
  const text = `the earlier record is of ${modulesListed(before.header)}, the later one of ${modulesListed(after.header)}.`;
  const different = comparison.sameModules ? [] : [{ word: 'DIFFERENT MODULES', text }];
  return [...different, ...[before, after].flatMap(endOf), ...sameReadings(before, after)];
}

/** Of a record with itself nobody needs to be told. */
function sameReadings(before: Result, after: Result): readonly Warning[] {
  if (before.fingerprints.header === after.fingerprints.header) return [];
  return sharedSteps(before, after).map(({ run, first, last }) => ({
    word: 'THE SAME READINGS',
    text:
      `${first === last ? `step ${first} of both records holds` : `steps ${first} to ${last} of both records hold`} what was measured once, ` +
      `in ${run}: what rests on that alone can't differ, and tells of no change.`,
  }));
}

function endOf(result: Result): readonly Warning[] {
  const { integrity, run } = result;
  const { how, reason } = endedHow(result);
  if (integrity.kind === 'damaged')
    return [
      {
        word: 'DAMAGED RECORD',
        text: `${run}, line ${integrity.line} of its journal: ${integrity.problem}.`,
      },
    ];
  if (how === 'cut-off')
    return [{ word: 'CUT OFF', text: `${run} ends without an end; only what is whole is compared.` }];
  return how === 'completed'
    ? []
    : [{ word: how.toUpperCase(), text: `${run}: ${reason ?? 'no reason is given'}` }];
}
