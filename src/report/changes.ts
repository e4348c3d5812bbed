import { allowedInWords, changeInWords, valueInWords } from '../judgement/change-in-words.js';
import { changesMissed, type Compared, type Comparison } from '../judgement/compare.js';
import { listed } from '../quantity/listed.js';
import type { ComparedRecords } from './comparison.js';
import { isWhole } from './result.js';

/** The answer to what changed, and where a record ends too early that it can say no more than it holds. */
export function answerInWords({ before, after, comparison }: ComparedRecords): readonly string[] {
  const short = [...(isWhole(before) ? [] : ['earlier']), ...(isWhole(after) ? [] : ['later'])];
  if (short.length === 0) return changesInWords(comparison);
  const which = short.length === 1 ? `the ${short[0] ?? ''} record does` : 'both records do';
  return [
    ...changesInWords(comparison),
    `What ${which} not show, not being whole or not having run to the end, may have changed.`,
  ];
}

/** What changed and by how much, and what can't be told, in a sentence or a few; the worst first. */
export function changesInWords({ findings, inNeither, sameModules }: Comparison): readonly string[] {
  const judged = findings.filter(({ outcome }) => outcome !== 'not-judged');
  const wrong = judged
    .filter(({ outcome }) => outcome === 'does-not-conform')
    .map((one) => wrongly(one, sameModules));
  const became = judged.filter(isMeantChange).map(rightly);
  const open = [
    ...judged.filter(({ outcome }) => outcome === 'undecided').map(({ finding }) => finding),
    ...changesMissed(inNeither).map(({ finding }) => finding),
  ];
  const kept = judged.filter((one) => one.outcome === 'conforms' && !isMeantChange(one)).length;
  if (wrong.length + became.length + open.length + kept === 0)
    return ['Nothing that the tolerance asks for is in these records.'];
  return [
    ...wrong,
    ...became,
    ...(open.length === 0 ? [] : [openInWords(open)]),
    ...(kept === 0 ? [] : [rest(kept, wrong.length + became.length + open.length, sameModules)]),
  ];
}

function openInWords(open: readonly string[]): string {
  const are = open.length === 1 ? 'is as it' : 'are as they';
  return `Whether ${listed(open)} ${are} should be can't be told.`;
}

function isMeantChange({ outcome, expected }: Compared): boolean {
  return outcome === 'conforms' && expected?.kind === 'becomes';
}

function wrongly(compared: Compared, sameModules: boolean): string {
  const { finding, expected, before, after, difference } = compared;
  if (expected?.kind === 'becomes') {
    const is = after === undefined ? 'unknown' : valueInWords(after);
    const still = before !== undefined && valueInWords(before) === is ? 'still ' : '';
    return `${finding} is ${still}${is} and must become ${expected.word}.`;
  }
  const change = changeInWords(compared);
  const [was, is] = [before, after].map((one) => (one === undefined ? '' : valueInWords(one))) as [
    string,
    string,
  ];
  const differs = `${finding} differs, ${was} in the earlier record and ${is} in the later one`;
  if (difference === undefined || expected === undefined)
    return sameModules ? `${finding} changed ${change} and must not.` : `${differs}, and must not.`;
  const moved = sameModules ? `${finding} moved from ${was} to ${is}` : differs;
  return `${moved}, by ${change}; allowed is ${allowedInWords(expected, compared)}.`;
}

function rightly({ finding, expected, verdict }: Compared): string {
  const word = expected?.kind === 'becomes' ? expected.word : '';
  return verdict === 'unchanged'
    ? `${finding} is ${word}, as it was before.`
    : `${finding} became ${word}, as it must.`;
}

function rest(kept: number, others: number, sameModules: boolean): string {
  const what = others === 0 ? 'Nothing' : 'Nothing else';
  return `${what} ${sameModules ? 'changed' : 'differs'} beyond its tolerance (${kept} compared).`;
}
