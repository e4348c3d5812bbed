import { leftBy, type ViewState } from '../view-state.js';
import { made, place, write, show } from './dom.js';
import { type FigureShown, figuresShown } from './numbers.js';
import type { Line } from './silence.js';
import { ageWords } from './wording.js';
import { clockTime } from '../../quantity/spoken-time.js';

const list = place('figures');
const heading = place('figures-heading');
const age = place('age');
const section = age.parentElement;
const rows = new Map<string, { readonly value: HTMLElement; readonly set: HTMLElement }>();

export function showFigures(state: ViewState, seconds: number | undefined, heard: Line): void {
  const isOver = leftBy(state) !== undefined;
  // Of a run that is over they are the last ones, whether the runner is still heard or not.
  const line: Line = isOver ? { kind: 'over' } : heard;
  for (const figure of figuresShown(state)) showFigure(figure);
  write(heading, line.kind === 'lost' || isOver ? 'Last read' : 'Now');
  write(place('note'), !isOver ? (state.figures.note ?? '') : '');
  const any = Object.keys(state.figures).some((name) => name !== 'note' && name !== 'setCurrent');
  const { text, old } = ageWords(seconds, any, line);
  write(age, text);
  section?.classList.toggle('old', old);
  section?.classList.toggle('aged', line.kind === 'lost');
  section?.classList.toggle('past', isOver);
  const latest = !isOver ? state.notices.at(-1) : undefined;
  show(place('latest'), latest !== undefined);
  if (latest !== undefined)
    write(place('latest'), `Latest notice, at ${clockTime(latest.t)}: ${latest.text}`);
}

function showFigure({ name, unit, digits, value, set }: FigureShown): void {
  const row = rows.get(name) ?? begun(name);
  const shown = value.kind === 'number' ? `${value.text} ${unit}` : value.words;
  if (row.value.dataset['shown'] !== shown) {
    row.value.dataset['shown'] = shown;
    row.value.replaceChildren(
      ...(value.kind === 'number'
        ? [numberOf(value.text, digits), ' ', made('span', { class: 'unit' }, unit)]
        : [made('span', { class: 'words' }, value.words)]),
    );
  }
  write(row.set, set ?? '');
}

/** A point takes a third of a digit, or a little more. */
function numberOf(text: string, digits: number): HTMLElement {
  const number = made('span', { class: 'number' }, text);
  number.style.minWidth = `${digits + 0.4}ch`;
  return number;
}

function begun(name: string): { readonly value: HTMLElement; readonly set: HTMLElement } {
  const first = name === 'Voltage' || name === 'Current';
  const row = { value: made('dd'), set: made('dd', { class: 'set' }) };
  list.append(
    made('div', { class: first ? 'figure first' : 'figure' }, made('dt', {}, name), row.value, row.set),
  );
  rows.set(name, row);
  return row;
}
