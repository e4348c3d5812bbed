import type { StepEvidence } from '../../analysis/evidence.js';
import type { Happening } from '../../analysis/happenings.js';
import { taken } from '../../analysis/pooled-points.js';
import { clockTime, spokenTime } from '../../quantity/spoken-time.js';
import { type Content, element, type Markup } from '../page/markup.js';
import { section } from '../page/page.js';
import { table } from '../page/table.js';
import type { Result } from '../result.js';
import { takenOver } from '../taken-over.js';
import { counted } from './in-words.js';

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
      inputsTogether(kept).map((row) => [
        when(row),
        row.step ?? '',
        sorts[row.kind],
        row.texts.map((text, index) => [index > 0 && element('br', {}), text]),
      ]),
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

/** A happening as a row; of one sort it may be several. */
interface Row extends Pick<Happening, 'kind' | 'step' | 'first' | 'last'> {
  readonly texts: readonly string[];
}

/** A search switches the load again and again: what it did to it in one step is one row. */
function inputsTogether(kept: readonly Happening[]): readonly Row[] {
  const rows: Row[] = [];
  const inputs = new Map<number | undefined, number>();
  for (const { kind, step, first, last, text, times } of kept) {
    const said = times === 1 ? text : `${text} (${times} times)`;
    const at = kind === 'input' ? inputs.get(step) : undefined;
    const before = at === undefined ? undefined : rows[at];
    if (at !== undefined && before !== undefined) {
      rows[at] = { ...before, last: Math.max(before.last, last), texts: [...before.texts, said] };
      continue;
    }
    if (kind === 'input') inputs.set(step, rows.length);
    rows.push({ kind, step, first, last, texts: [said] });
  }
  return rows;
}

function when({ first, last }: Row): string {
  const [from, to] = [clockTime(first), clockTime(last)];
  return from === to ? from : `${from} to ${to}`;
}

function stepsTable(result: Result): Markup | undefined {
  const { header, evidence } = result;
  const planned = header.steps.map(({ kind, summary }, index) => {
    const step = evidence.steps.find((each) => each.step === index + 1);
    return [`${index + 1} ${kind}`, summary, ...(step === undefined ? notBegun : begun(result, step))];
  });
  return table(
    'Steps as they were planned, and what came of each.',
    [
      { heading: 'Step', as: 'name' },
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
  return [clockTime(began), took, taken(points), readings];
}
