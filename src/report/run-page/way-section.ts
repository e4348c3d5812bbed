import type { StepEvidence } from '../../analysis/evidence.js';
import type { Happening } from '../../analysis/happenings.js';
import { clockTime, spokenTime } from '../../quantity/spoken-time.js';
import { type Content, element, type Markup } from '../page/markup.js';
import { section } from '../page/page.js';
import { table } from '../page/table.js';
import type { Result } from '../result.js';
import { takenOver } from '../taken-over.js';
import { counted } from './budgets-section.js';

/** How the run went: its steps, and what happened on the way. */
export function waySection(result: Result): Markup {
  const { kept, missed } = result.evidence.happenings;
  return section(
    'How the run went',
    stepsTable(result),
    kept.length > 0 && element('h3', {}, 'What happened on the way'),
    table(
      'Times from the beginning of the run; what came again in one step is counted.',
      [
        { heading: 'When', as: 'name' },
        { heading: 'Step', as: 'number' },
        { heading: 'Sort', as: 'fixed' },
        { heading: 'What', as: 'long' },
      ],
      kept.map((happening) => [when(happening), happening.step ?? '', sorts[happening.kind], happening.text]),
    ),
    missed > 0 &&
      element(
        'p',
        {},
        `Between the first and the last of them ${counted(missed, 'more')} stand in the journal.`,
      ),
  );
}

const sorts: Readonly<Record<Happening['kind'], string>> = {
  notice: 'notice',
  asked: 'asked',
  answered: 'answered',
  input: 'load',
  guard: 'guard',
  'taken-again': 'taken again',
  recovery: 'recovery',
};

function when({ first, last, times }: Happening): string {
  if (times === 1) return clockTime(first);
  return `${clockTime(first)} to ${clockTime(last)}, ${times} times`;
}

function stepsTable(result: Result): Markup | undefined {
  const { header, evidence } = result;
  const planned = header.steps.map(({ kind, summary }, index) => {
    const step = evidence.steps.find((each) => each.step === index + 1);
    return [index + 1, kind, summary, ...(step === undefined ? notBegun : begun(result, step))];
  });
  return table(
    'Steps as they were planned, and what came of each.',
    [
      { heading: 'No.', as: 'name' },
      { heading: 'Step', as: 'fixed' },
      { heading: 'What it does', as: 'long' },
      { heading: 'Began', as: 'number' },
      { heading: 'Took', as: 'fixed' },
      { heading: 'Points', as: 'number' },
      { heading: 'Readings', as: 'number' },
    ],
    planned,
  );
}

const notBegun: readonly Content[] = ['', element('span', { class: 'state unsure' }, 'not begun'), '', ''];

function begun(result: Result, step: StepEvidence): readonly Content[] {
  const { began, ended, points, readings } = step;
  const part = takenOver(result.evidence).find(({ first, last }) => step.step >= first && step.step <= last);
  const took =
    ended === undefined
      ? element('span', { class: 'state bad' }, 'broken off')
      : [spokenTime(ended - began), part !== undefined && ', in an earlier run'];
  return [clockTime(began), took, points.length, readings];
}
