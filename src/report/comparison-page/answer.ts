import type { Outcome } from '../../judgement/decision.js';
import { answerInWords } from '../changes.js';
import { comparisonWarnings } from '../comparison-warnings.js';
import { type ComparedRecords, outcomeOf } from '../comparison.js';
import { type Content, element } from '../page/markup.js';
import { bullets } from '../page/page.js';
import { type Standing, standingPanel } from '../page/standing.js';

const standings: Readonly<Record<Outcome, Standing>> = {
  conforms: { word: 'As it should be', look: 'good', shape: 'tick' },
  'does-not-conform': { word: 'Not as it should be', look: 'bad', shape: 'bar' },
  undecided: { word: 'Not all can be told', look: 'unsure', shape: 'question' },
};

/** What must be known first, then whether all is as it should be, and what is not. */
export function comparisonAnswer(records: ComparedRecords): Content {
  const sentences = answerInWords(records);
  const { name, title } = records.tolerance;
  return [
    comparisonWarnings(records).map(({ word, text }) =>
      element('p', { class: 'warning' }, element('strong', {}, `${word}: `), text),
    ),
    standingPanel(
      standings[outcomeOf(records)],
      sentences.length === 1 ? element('p', { class: 'lead' }, sentences) : bullets(sentences),
      element('p', { class: 'soft' }, `By the tolerance ${name}: ${title}.`),
    ),
  ];
}
