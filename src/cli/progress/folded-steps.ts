import { printable } from '../../quantity/printable.js';
import { spokenTime } from '../../quantity/spoken-time.js';
import { pointsInWords, type RunSoFar, type StepSoFar } from './run-so-far.js';

export interface StepLine {
  readonly text: string;
  readonly state: StepSoFar['state'];
}

const words: Readonly<Record<StepSoFar['state'], string>> = {
  'taken-over': 'taken over',
  done: 'done',
  now: 'now',
  'to-come': 'to come',
};

/**
 * The steps of a run, a line each, in no more lines than there are: the one under way always, the one before it and
 * those after it as far as they go; the others are counted.
 */
export function stepLines(run: RunSoFar, lines: number, unicode: boolean): readonly StepLine[] {
  const { steps } = run;
  const now = (run.now?.number ?? 1) - 1;
  const { first, end } = shownOf(steps.length, now, Math.max(1, lines));
  const columns = {
    word: widest(steps.map(({ state }) => words[state])),
    number: String(steps.length).length,
    kind: widest(steps.slice(first, end).map(({ kind }) => kind)),
  };
  const before = steps.slice(0, first).length;
  const after = steps.length - end;
  const hasRoom = lines > 1;
  return [
    ...(before > 0 && lines > 2 ? [{ text: `  ${before} before`, state: 'done' as const }] : []),
    ...steps
      .slice(first, end)
      .map((step) => ({ text: stepLine(step, columns, run, unicode), state: step.state })),
    ...(after > 0 && hasRoom ? [{ text: `  ${after} more to come`, state: 'to-come' as const }] : []),
  ];
}

/** The steps that are shown, where there is a line for those before and one for those after, as needed. */
function shownOf(
  count: number,
  now: number,
  lines: number,
): { readonly first: number; readonly end: number } {
  if (count <= lines) return { first: 0, end: count };
  if (lines <= 2) return { first: now, end: now + 1 };
  for (let room = lines - 1; room >= lines - 2; room -= 1) {
    const first = Math.min(Math.max(0, now - (room > 1 ? 1 : 0)), count - room);
    const folded = (first > 0 ? 1 : 0) + (first + room < count ? 1 : 0);
    if (room + folded <= lines) return { first, end: first + room };
  }
  return { first: now, end: now + 1 };
}

function stepLine(
  step: StepSoFar,
  columns: { readonly word: number; readonly number: number; readonly kind: number },
  run: RunSoFar,
  unicode: boolean,
): string {
  const mark = markOf(step.state, unicode);
  const number = String(step.number).padStart(columns.number);
  const head = `${mark} ${words[step.state].padEnd(columns.word)}  ${number}  ${step.kind.padEnd(columns.kind)}`;
  return `${head}  ${detail(step, run)}`.trimEnd();
}

function markOf(state: StepSoFar['state'], unicode: boolean): string {
  switch (state) {
    case 'taken-over':
    case 'done':
      return unicode ? '✓' : '+';
    case 'now':
      return unicode ? '▸' : '>';
    case 'to-come':
      return ' ';
  }
}

function detail(step: StepSoFar, { plan, figures }: RunSoFar): string {
  switch (step.state) {
    case 'taken-over':
      return 'in an earlier run';
    case 'done': {
      const came = pointsInWords(step.points);
      return `in ${spokenTime(step.took ?? 0)}${came === '' ? '' : `, ${came}`}`;
    }
    case 'now':
      return printable(figures.note ?? step.summary);
    case 'to-come':
      return `about ${spokenTime(plan.steps[step.number - 1]?.duration ?? 0)}`;
  }
}

function widest(texts: readonly string[]): number {
  return Math.max(0, ...texts.map(({ length }) => length));
}
