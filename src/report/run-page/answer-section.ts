import { findingNamed } from '../../analysis/finding.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { answer } from '../answer.js';
import { inOneLine } from '../finding-text.js';
import { type Content, element, type Markup, together } from '../page/markup.js';
import { bullets } from '../page/page.js';
import { type Standing, standingPanel } from '../page/standing.js';
import { modulesInWords } from '../record-heading.js';
import { endedHow, isWhole, type Result } from '../result.js';
import { type Warning, warningsOf } from '../warnings.js';

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
  const cells = [
    recommended(result),
    measured(result, 'Usable', 'usable-current'),
    measured(result, 'Limit style', 'limit-style'),
    measured(result, 'Hogging module', 'hogging-module'),
    measured(result, 'Weakest module', 'weakest-module'),
    measured(result, 'Output to earth', 'earth-relation'),
  ].filter((cell) => cell !== undefined);
  return cells.length === 0 ? undefined : element('dl', { class: 'figures' }, cells);
}

/** What a test that was not finished saw stands in small letters: from two steps away it would pass for a result. */
function measured(result: Result, word: string, name: string): Markup | undefined {
  const finding = findingNamed(result.findings, name);
  if (finding === undefined) return undefined;
  const found = `${finding.bound === 'least' ? 'at least ' : ''}${inOneLine(finding)}`;
  if (isWhole(result)) return cell(word, found, finding.note);
  const [large, before] = notWhole(result);
  return cell(word, large, `${before}: ${found}${finding.note === '' ? '' : `; ${finding.note}`}`);
}

function notWhole(result: Result): readonly [large: string, before: string] {
  return result.integrity.kind === 'damaged'
    ? ['record damaged', 'as far as it can be believed']
    : ['not finished', 'seen so far'];
}

function recommended(result: Result): Markup | undefined {
  const finding = findingNamed(result.findings, 'recommended-current');
  if (finding === undefined) return undefined;
  const word = 'Recommended, continuously';
  if (!isWhole(result))
    return cell(
      word,
      'nothing',
      result.integrity.kind === 'damaged' ? 'the record is damaged' : 'the test was not finished',
    );
  if (result.outcome === 'does-not-conform') return cell(word, 'nothing', 'it does not conform');
  const current = Number(finding.value);
  if (current <= 0) return cell(word, 'no load', finding.note);
  const upTo = `up to ${roundedDown(current, 'current')}`;
  if (result.outcome === 'undecided')
    return cell(word, `${upTo}, if it conforms`, `whether it does is undecided; ${finding.note}`);
  return cell(word, finding.bound === 'least' ? `${upTo}, as far as tried` : upTo, finding.note);
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
