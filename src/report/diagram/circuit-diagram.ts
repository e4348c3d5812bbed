import type { Circuit } from '../../arrangement/build.js';
import { cutToWidth } from '../chart/text-width.js';
import { type ChartWords } from '../chart/frame.js';
import { element, type Markup, short } from '../page/markup.js';
import { layout, type Surroundings } from './layout.js';
import { type Piece, sizes } from './pieces.js';
import { besideParts, roomOfAll } from './room.js';

const border = 12;

/** A circuit drawn with the symbols of IEC 60617, as wide as it needs to be. */
export function circuitDiagram(words: ChartWords, circuit: Circuit, surroundings: Surroundings = {}): Markup {
  const pieces = layout(circuit, surroundings);
  const { left, top, right, bottom } = roomOfAll(pieces);
  const width = right - left + 2 * border;
  const height = bottom - top + 2 * border;
  return element(
    'svg',
    {
      class: 'diagram',
      viewBox: [left - border, top - border, width, height].map(short).join(' '),
      width,
      height,
      role: 'img',
      'aria-labelledby': `${words.id}-title ${words.id}-desc`,
    },
    element('title', { id: `${words.id}-title` }, words.title),
    element('desc', { id: `${words.id}-desc` }, words.description),
    // Wires first, so that what stands on them covers them.
    [...pieces].sort((one, other) => rank(one) - rank(other)).map(drawn),
  );
}

function rank({ kind }: Piece): number {
  return kind === 'wire' ? 0 : 1;
}

function drawn(piece: Piece): Markup {
  switch (piece.kind) {
    case 'wire':
      return element('path', { class: 'wire', d: path(piece.through) });
    case 'junction':
      return element('circle', { class: 'solid', cx: piece.x, cy: piece.y, r: 3 });
    case 'module':
      return moduleBox(piece);
    case 'stage':
      return element('g', {}, box(piece, sizes.stage), label(piece.name, piece.x, piece.y + 4.5));
    case 'resistor':
      return element(
        'g',
        {},
        box(piece, sizes.resistor, 'resistor'),
        beside(piece.mark, piece.x, piece.y - 3, 'strong'),
        beside(piece.value, piece.x, piece.y + 13, 'value'),
      );
    case 'diode':
      return diode(piece);
    case 'terminal':
      return element(
        'g',
        {},
        element('circle', { class: 'terminal', cx: piece.x, cy: piece.y, r: sizes.terminal.radius }),
        element('text', { class: 'strong', x: piece.x + 10, y: piece.y + 4.5 }, piece.name),
      );
    case 'earth':
      return element('path', {
        class: 'symbol',
        d: [11, 7, 3].map((half, row) => `M${piece.x - half} ${piece.y + 6 * row}h${2 * half}`).join(''),
      });
  }
}

function moduleBox({ name, plate, x, y }: Extract<Piece, { kind: 'module' }>): Markup {
  const { width, height } = sizes.module;
  const shown = cutToWidth(name, width - 12);
  return element(
    'g',
    {},
    element('title', {}, name),
    box({ x, y }, sizes.module),
    label('+', x, y - height / 2 + 15),
    element('text', { class: 'strong', x, y: plate === '' ? y + 4 : y - 2, 'text-anchor': 'middle' }, shown),
    plate !== '' && label(cutToWidth(plate, width - 12), x, y + 15, 'value'),
    label('−', x, y + height / 2 - 5),
  );
}

/** A triangle that points where the current goes, and a bar. */
function diode({ mark, x, y }: Extract<Piece, { kind: 'diode' }>): Markup {
  const half = sizes.diode.width / 2;
  return element(
    'g',
    {},
    element('path', {
      class: 'symbol',
      d: `M${x - half} ${y + half}h${2 * half}L${x} ${y - half}zM${x - half} ${y - half}h${2 * half}`,
    }),
    beside(mark, x, y + 4.5, 'strong'),
  );
}

function box(
  { x, y }: { readonly x: number; readonly y: number },
  { width, height }: { readonly width: number; readonly height: number },
  look = 'box',
): Markup {
  return element('rect', { class: look, x: x - width / 2, y: y - height / 2, width, height });
}

function label(text: string, x: number, y: number, look?: string): Markup {
  return element('text', { class: look, x, y, 'text-anchor': 'middle' }, text);
}

function beside(text: string, x: number, y: number, look: string): Markup {
  return element('text', { class: look, x: x + besideParts, y }, text);
}

function path(through: readonly (readonly [number, number])[]): string {
  return `M${through.map(([x, y]) => `${short(x)} ${short(y)}`).join('L')}`;
}
