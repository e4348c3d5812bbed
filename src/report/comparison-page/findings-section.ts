import { changeInWords } from '../../judgement/change-in-words.js';
import { changesMissed, type Compared } from '../../judgement/compare.js';
import { listed } from '../../quantity/listed.js';
import { verdictWords, type ComparedRecords } from '../comparison.js';
import { normalizedErrorInWords } from '../normalized-error.js';
import { type Content, element, type Markup } from '../page/markup.js';
import { section } from '../page/page.js';
import { table } from '../page/table.js';
import { probabilityInWords } from '../record-words.js';
import { demandInWords, valuePlusMinus } from './compared-words.js';
import { allowanceFigure } from './allowance-chart.js';

/** Every finding of either record: both values, the difference, what was allowed, and what became of it. */
export function findingsSection(records: ComparedRecords): Markup {
  const { findings, inNeither } = records.comparison;
  const missed = changesMissed(inNeither).map(({ finding, word }) => `${finding} (must become ${word})`);
  const absent = inNeither.map(({ finding }) => finding);
  return section(
    'All findings',
    findings.length === 0 && element('p', {}, 'No findings: the records hold too little.'),
    table(
      'Value ± U, difference ± U = √(U₁² + U₂²), all with 95 %; E_n is the difference over its U.',
      [
        { heading: 'Finding', as: 'name' },
        { heading: 'Earlier', as: 'number' },
        { heading: 'Later', as: 'number' },
        { heading: 'Difference' },
        { heading: 'Verdict', as: 'long' },
      ],
      findings.map(cellsOf),
    ),
    missed.length > 0 &&
      element('p', {}, element('strong', {}, 'Asked for and in neither record: '), `${listed(missed)}.`),
    absent.length > 0 && element('p', { class: 'soft' }, `In neither record: ${absent.join(', ')}.`),
  );
}

function cellsOf(compared: Compared): readonly Content[] {
  const { finding, before, after } = compared;
  return [
    finding,
    before === undefined ? '' : inOne(inTwoLines(valuePlusMinus(before))),
    after === undefined ? '' : inOne(inTwoLines(valuePlusMinus(after))),
    differenceOf(compared),
    inOne([verdictOf(compared), softly(becauseOf(compared))]),
  ];
}

/** On a phone a cell stands beside its heading, and each child of it would be a cell of its own there. */
function inOne(content: Content): Markup {
  return element('span', {}, content);
}

function becauseOf(compared: Compared): string {
  const { expected, note, probability, verdict } = compared;
  const allowed = expected === undefined ? 'nothing is asked' : demandInWords(expected, compared);
  const chance =
    probability === null || verdict !== 'cannot-tell'
      ? ''
      : `within that with a probability of ${probabilityInWords(probability)}`;
  return [allowed, chance, note].filter((part) => part !== '').join('; ');
}

/** `5.281` above `± 0.018 A`, `at least` above `4 A`: a column of values that is no wider than they are. */
function inTwoLines(value: string): Content {
  const [first = '', ...others] = value.split(/(?<=^at least) | (?=± )/);
  return [first, others.map((part) => [element('br', {}), part])];
}

function differenceOf(compared: Compared): Content {
  const { difference } = compared;
  const change = changeInWords(compared);
  if (difference === undefined || change === '') return '';
  const { normalizedError } = difference;
  const ratio = normalizedError === null ? '' : `E_n ${normalizedErrorInWords(normalizedError)}`;
  return inOne([change, softly(ratio)]);
}

function softly(text: string): Content {
  return text !== '' && [element('br', {}), element('span', { class: 'soft' }, text)];
}

const outcomeLooks = { 'does-not-conform': 'bad', undecided: 'unsure', conforms: 'good', 'not-judged': '' };

function verdictOf({ verdict, outcome }: Compared): Markup {
  const word = verdictWords[verdict];
  return element(
    'span',
    { class: `state ${outcomeLooks[outcome]}`.trim() },
    outcome === 'does-not-conform' ? word.toUpperCase() : word,
  );
}

/** The picture of them all, before the table. */
export function allowanceSection(records: ComparedRecords): Markup | undefined {
  const drawn = allowanceFigure(records);
  return drawn === undefined ? undefined : section('Against what is allowed', drawn);
}
