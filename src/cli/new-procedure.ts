import { line, name } from '../files/building-blocks.js';
import { readCriterion } from '../files/criterion.js';
import { adaptedProcedure, emptyProcedure } from '../files/new-procedure.js';
import type { Criterion, Requirement } from '../files/procedure.js';
import { readProcedure } from '../files/read-procedure.js';
import { formatShare } from '../quantity/format-quantity.js';
import { listed } from '../quantity/listed.js';
import { findingDimension } from '../files/vocabulary.js';
import { readBy } from './answer-readers.js';
import { type CriterionQuestion, purposes, type Purpose } from './new-procedure-purposes.js';
import { type Questions, UnfitAnswerError } from './questions.js';
import { shipped } from './shipped.js';
import { vocabulary } from './vocabulary.js';

export interface AskedProcedure {
  readonly name: string;
  readonly text: string;
  /** How many modules a run of it takes, as the next command shows it. */
  readonly modules: number;
}

/** What a procedure is to find out, and what is required of the result. @throws NothingWrittenError */
export async function askProcedure(questions: Questions, called?: string): Promise<AskedProcedure> {
  const purpose = await questions.choose(
    {
      ask: 'What is it to find out?',
      why: 'It begins as the shipped procedure that answers this; every line of it may be changed afterwards.',
    },
    purposes.map((each) => ({ word: each.word, means: each.means, value: each })),
  );
  const usualName = called ?? `my-${purpose.from ?? 'procedure'}`;
  const procedureName = await questions.ask({
    ask: 'What is the procedure called?',
    why: 'Its records are filed under the module and this.',
    usual: { value: usualName, words: usualName },
    read: readBy(name('', ['pump-line'])),
  });
  const text = await (purpose.from === undefined
    ? askEmpty(questions, procedureName, purpose)
    : askAdapted(questions, procedureName, purpose, purpose.from));
  return { name: procedureName, text, modules: purpose.modules };
}

async function askAdapted(
  questions: Questions,
  procedureName: string,
  purpose: Purpose,
  from: string,
): Promise<string> {
  const base = await readProcedure(from, vocabulary, { relativeTo: '.', shipped: shipped.procedures });
  const title = await askTitle(questions, base.value.title);
  const criteria = await askCriteria(questions, purpose.criteria, base.value.criteria);
  return adaptedProcedure(base.text, { name: procedureName, title, criteria }, vocabulary);
}

async function askEmpty(questions: Questions, procedureName: string, { criteria }: Purpose): Promise<string> {
  const title = await askTitle(questions, undefined);
  const purpose = await questions.ask({
    ask: 'Why would one run it?',
    why: 'A sentence or two for whoever finds it later.',
    usual: { value: '', words: 'nothing is written down' },
    read: readBy(line('')),
  });
  return emptyProcedure(
    { name: procedureName, title, purpose, criteria: await askCriteria(questions, criteria, []) },
    vocabulary,
  );
}

function askTitle(questions: Questions, usual: string | undefined): Promise<string> {
  return questions.ask({
    ask: 'What does it do, as a headline?',
    why: 'It stands above the plan and the report: Can this brick feed a pump under the roof?',
    ...(usual === undefined ? {} : { usual: { value: usual, words: usual } }),
    read: readBy(line('').min(1)),
  });
}

/** The criteria that it had, those asked for in place of those of the same kind. */
async function askCriteria(
  questions: Questions,
  asked: readonly CriterionQuestion[],
  before: readonly Criterion[],
): Promise<readonly Criterion[]> {
  let criteria = before;
  for (const question of asked) {
    const isSame = ({ finding, requirement }: Criterion): boolean =>
      finding === question.finding && requirement.kind === question.form;
    const kept = criteria.find(isSame);
    const given = await questions.ask({
      ask: question.ask,
      why: question.why,
      usual: {
        value: kept,
        words: kept === undefined ? 'nothing is required of it' : `${requirementText(kept)}, as it was`,
      },
      read: (answer) => readOne(question, answer),
    });
    const at = criteria.findIndex(isSame);
    if (given !== undefined) criteria = at < 0 ? [...criteria, given] : criteria.with(at, given);
  }
  return criteria;
}

function readOne({ finding, form }: CriterionQuestion, answer: string): Criterion {
  const read = readCriterion({ finding, [form]: answer }, [], vocabulary);
  if ('finding' in read) return read;
  throw new UnfitAnswerError(listed(read.map(({ message }) => message)));
}

function requirementText({ finding, requirement }: Criterion): string {
  return requirement.kind === 'is' ? requirement.word : valueText(finding, requirement);
}

function valueText(finding: string, { value }: Exclude<Requirement, { readonly kind: 'is' }>): string {
  const dimension = findingDimension(finding, vocabulary);
  if (dimension === undefined || dimension === 'word') throw new Error(`${finding} is no quantity`);
  return formatShare(value, dimension);
}
