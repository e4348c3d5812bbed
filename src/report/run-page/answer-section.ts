import { type Finding, findingNamed } from '../../analysis/finding.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { answer } from '../answer.js';
import { type Content, element, type Markup, together } from '../page/markup.js';
import { bullets } from '../page/page.js';
import { type Standing, standingPanel } from '../page/standing.js';
import { modulesInWords } from '../record-heading.js';
import { endedHow, isWhole, type Result } from '../result.js';
import { type Warning, warningsOf } from '../warnings.js';
import { foundPlusMinus } from './in-words.js';

/** What must be known before anything is believed, then how it stands, in words and in three figures or so. */
export function answerSection(result: Result): Markup {
  return together(warningPanel(result), answerPanel(result), figures(result));
}

function warningPanel(result: Result): Markup | undefined {
  const warnings = warningsOf(result);
  if (warnings.length === 0) return undefined;
  return standingPanel(
    { look: 'bad', shape: 'warning', word: warned(result) },
    bullets(warnings.map(inWords)),
    !isWhole(result) &&
      element(
        'p',
        { class: 'lead' },
        `Nobody should load or use ${modulesInWords(result.header)} on the strength of this record.`,
      ),
  );
}

function inWords({ word, text }: Warning): Content {
  return [element('strong', {}, word), text.startsWith('when ') ? ' ' : ': ', text];
}

const unfinished = {
  stopped: 'Stopped: this test was not finished',
  failed: 'Failed: this test was not finished',
  'cut-off': 'Cut off: this test was not finished',
} as const;

function warned(result: Result): string {
  if (result.integrity.kind === 'damaged') return 'This record is damaged';
  const { how } = endedHow(result);
  return how === 'completed' ? 'To be known first' : unfinished[how];
}

const standings: Readonly<Record<Result['outcome'], Standing>> = {
  conforms: { look: 'good', shape: 'tick', word: 'Conforms' },
  'does-not-conform': { look: 'bad', shape: 'bar', word: 'Does not conform' },
  undecided: { look: 'unsure', shape: 'question', word: 'Undecided' },
  'not-judged': { look: 'plain', shape: 'sheet', word: 'Measured; nothing was required of it' },
};

function answerPanel(result: Result): Markup {
  const standing = standings[result.outcome];
  const [first, ...others] = answer(result);
  return standingPanel(
    isWhole(result) ? standing : { ...standing, word: `As far as it went: ${inSentence(standing.word)}` },
    first === undefined
      ? element('p', {}, 'No findings: the record holds too little.')
      : element('p', { class: 'lead' }, first),
    bullets(others),
  );
}

function inSentence(word: string): string {
  return word.charAt(0).toLowerCase() + word.slice(1);
}

/** What the reader came for, to be read from two steps away. */
function figures(result: Result): Markup | undefined {
  const { findings } = result;
  const named = (name: string): Finding | undefined => findingNamed(findings, name);
  const cells = [
    recommended(result, named('recommended-current')),
    measured('Usable', named('usable-current')),
    measured('Limit style', named('limit-style')),
    measured('Hogging module', named('hogging-module')),
    measured('Weakest module', named('weakest-module')),
    measured('Output to earth', named('earth-relation')),
  ].filter((cell) => cell !== undefined);
  return cells.length === 0 ? undefined : element('dl', { class: 'figures' }, cells);
}

function measured(word: string, finding: Finding | undefined): Markup | undefined {
  if (finding === undefined) return undefined;
  return cell(word, foundPlusMinus(finding), finding.note);
}

function recommended(result: Result, finding: Finding | undefined): Markup | undefined {
  if (finding === undefined) return undefined;
  const word = 'Recommended, continuously';
  if (!isWhole(result)) return cell(word, 'nothing', 'the test was not finished');
  if (result.outcome === 'does-not-conform') return cell(word, 'nothing', 'it does not conform');
  const current = Number(finding.value);
  return cell(word, current > 0 ? `up to ${roundedDown(current, 'current')}` : 'no load', finding.note);
}

function cell(word: string, value: string, note: string): Markup {
  return element(
    'div',
    {},
    element('dt', {}, word),
    element('dd', { class: 'big' }, value),
    note !== '' && element('dd', { class: 'soft' }, note),
  );
}
