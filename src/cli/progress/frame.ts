import { formatQuantity } from '../../quantity/format-quantity.js';
import { printable } from '../../quantity/printable.js';
import type { Dimension } from '../../quantity/quantity.js';
import { clockTime } from '../../quantity/spoken-time.js';
import type { Style } from '../../report/style.js';
import { stepLines } from './folded-steps.js';
import type { RunSoFar } from './run-so-far.js';

/** What a block may take of a terminal, and how it may look there. */
export interface Window {
  readonly columns: number;
  readonly rows: number;
  readonly unicode: boolean;
  readonly style: Style;
}

/** Wide enough for `no reading` and a blank. */
const cell = 12;
const widestBar = 40;
const leastBar = 6;

/**
 * The block that shows a run: what is tested, its steps, what is read, the time, the last notice. As many lines as the
 * window holds with one left for the cursor, none of them as wide as the window; on a low one the steps are folded
 * first. Of a tall window a third is left to what stands above the block.
 */
export function frame(run: RunSoFar, notice: string | undefined, window: Window): readonly string[] {
  const { columns, rows, unicode } = window;
  const style = window.style;
  const width = columns - 1;
  const height = Math.min(rows - 1, Math.max(13, Math.floor((rows * 2) / 3)));
  const figures = figureLines(run, width, style);
  const time = cut(timeLine(run, width, unicode), width, unicode);
  const told = notice === undefined ? [] : [style.faint(cut(`last notice: ${notice}`, width, unicode))];
  const sparse = height >= 4 + figures.length + 2 ? told : [];
  const room = height - 2 - figures.length - sparse.length;
  const airy = room >= run.steps.length + 2;
  const gap = airy ? [''] : [];
  const steps = stepLines(run, room - 2 * gap.length, unicode).map(({ text, state }) => {
    const line = cut(text, width, unicode);
    if (state === 'now') return style.strong(line);
    return state === 'to-come' ? style.faint(line) : line;
  });
  return [
    style.strong(headLine(run, width, unicode)),
    ...steps,
    ...gap,
    ...figures,
    ...gap,
    time,
    ...sparse,
  ].slice(0, height);
}

/** The procedure by its title where that fits beside the step, else by its name. */
function headLine({ plan, now, steps }: RunSoFar, width: number, unicode: boolean): string {
  const where = now === undefined ? 'before the first step' : `step ${now.number} of ${steps.length}`;
  const dot = unicode ? ' · ' : ', ';
  const module = printable(plan.underTest.name);
  for (const procedure of [plan.procedure.title, plan.procedure.name]) {
    const what = `${module}${dot}${printable(procedure)}`;
    if (what.length + where.length + 2 <= width) return what.padEnd(width - where.length) + where;
  }
  return cut(`${where}${dot}${module}`, width, unicode);
}

function figureLines({ plan, figures }: RunSoFar, width: number, style: Style): readonly string[] {
  const { setCurrent, voltage, current, temperature } = figures;
  const power = voltage === undefined || current === undefined ? undefined : voltage * current;
  const hasThermometer = plan.bench.instruments.thermometer !== undefined || temperature !== undefined;
  const cells: readonly (readonly [string, string])[] = [
    ['set to', shown(setCurrent, 'current')],
    ['voltage', shown(voltage, 'voltage')],
    ['current', shown(current, 'current')],
    ['power', shown(power, 'power')],
    ...(hasThermometer ? [['temperature', shown(temperature, 'temperature')] as const] : []),
  ];
  const across = Math.max(1, Math.floor(width / cell));
  const set = (text: string): string => text.padStart(Math.min(cell, width)).slice(0, width);
  const lines: string[] = [];
  for (let first = 0; first < cells.length; first += across) {
    const row = cells.slice(first, first + across);
    lines.push(style.faint(row.map(([name]) => set(name)).join('')));
    lines.push(row.map(([, value]) => set(value)).join(''));
  }
  return lines;
}

function shown(value: number | undefined, dimension: Dimension): string {
  if (value === undefined) return '-';
  return Number.isNaN(value) ? 'no reading' : formatQuantity(value, dimension, { significant: 4 });
}

function timeLine({ elapsed, left }: RunSoFar, width: number, unicode: boolean): string {
  const words = `${clockTime(elapsed)} gone, about ${clockTime(left)} left`;
  const room = Math.min(widestBar, width - words.length - 4);
  if (room < leastBar) return words;
  const share = elapsed + left > 0 ? elapsed / (elapsed + left) : 0;
  const full = Math.min(room, Math.max(0, Math.round(share * room)));
  const [gone, coming] = unicode ? ['█', '░'] : ['#', '.'];
  return `  ${gone.repeat(full)}${coming.repeat(room - full)}  ${words}`;
}

/** As much of a text as a line holds. */
export function cut(text: string, width: number, unicode: boolean): string {
  const signs = Array.from(text);
  if (signs.length <= width) return text;
  const end = unicode ? '…' : '~';
  return width < 1
    ? ''
    : `${signs
        .slice(0, width - 1)
        .join('')
        .trimEnd()}${end}`;
}
