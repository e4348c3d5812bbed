import { allowedInWords, changeInWords, valueInWords } from '../judgement/change-in-words.js';
import { changesMissed, type Compared, type Comparison } from '../judgement/compare.js';
import { listed } from '../quantity/listed.js';

/** What changed and by how much, and what can't be told, in a sentence or a few; the worst first. */
export function changesInWords({ findings, inNeither }: Comparison): readonly string[] {
  const judged = findings.filter(({ outcome }) => outcome !== 'not-judged');
  const wrong = judged.filter(({ outcome }) => outcome === 'does-not-conform').map(wrongly);
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
    ...(open.length === 0 ? [] : [`It can't be told of ${listed(open)}.`]),
    ...(kept === 0 ? [] : [rest(kept, wrong.length + became.length + open.length)]),
  ];
}

function isMeantChange({ outcome, expected }: Compared): boolean {
  return outcome === 'conforms' && expected?.kind === 'becomes';
}

function wrongly(compared: Compared): string {
  const { finding, expected, before, after, difference } = compared;
  if (expected?.kind === 'becomes') {
    const is = after === undefined ? 'unknown' : valueInWords(after);
    const still = before !== undefined && valueInWords(before) === is ? 'still ' : '';
    return `${finding} is ${still}${is} and must become ${expected.word}.`;
  }
  const change = changeInWords(compared);
  if (difference === undefined || expected === undefined) return `${finding} changed ${change} and must not.`;
  const [was, is] = [before, after].map((one) => (one === undefined ? '' : valueInWords(one)));
  return `${finding} moved from ${was ?? ''} to ${is ?? ''}, by ${change}; allowed is ${allowedInWords(expected, compared)}.`;
}

function rightly({ finding, expected, verdict }: Compared): string {
  const word = expected?.kind === 'becomes' ? expected.word : '';
  return verdict === 'unchanged'
    ? `${finding} is ${word}, as it was before.`
    : `${finding} became ${word}, as it must.`;
}

function rest(kept: number, others: number): string {
  const what = others === 0 ? 'Nothing' : 'Nothing else';
  return `${what} changed beyond its tolerance (${kept} compared).`;
}
