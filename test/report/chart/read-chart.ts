import type { Markup } from '../../../src/report/page/markup.js';

/** A chart read back off its drawing alone: by the numbers at its ticks, as a reader would. */
export interface ChartRead {
  readonly marks: readonly ReadMark[];
  /** By the name of the line; in the units of the axes. */
  readonly lines: ReadonlyMap<string, readonly Point[]>;
  readonly bands: readonly (readonly Point[])[];
  readonly whiskers: readonly ReadSpan[];
  /** What single points lie between. */
  readonly reaches: readonly ReadSpan[];
  /** Shaded stretches of x, with what they say. */
  readonly stretches: readonly { readonly from: number; readonly to: number; readonly says: string }[];
  readonly texts: readonly string[];
  readonly title: string;
  readonly description: string;
}

interface ReadSpan {
  readonly x: number;
  readonly low: number;
  readonly high: number;
}

type Point = readonly [x: number, y: number];

export interface ReadMark {
  readonly shape: string;
  readonly x: number;
  readonly y: number;
  /** In units of the drawing. */
  readonly at: Point;
  readonly says: string;
}

/** The first chart of a piece of markup, or that of an id. */
export function readChart(markup: Markup, id = ''): ChartRead {
  const whole = markup.toString();
  const from = id === '' ? 0 : whole.lastIndexOf('<svg', whole.indexOf(`id="${id}-title"`));
  const svg = whole.slice(from, whole.indexOf('</svg>', from));
  const [toX, toY] = [scaleOf(svg, 'middle', 'x'), scaleOf(svg, 'end', 'y')];
  const placed = ([x, y]: Point): Point => [toX(x), toY(y)];
  return {
    marks: [
      ...svg.matchAll(/class="shape" data-of="([^"]+)" d="M(\S+) ([^ma-z]+)m[^"]*"><title>([^<]*)/g),
    ].map(([, shape = '', x, y, says = '']) => {
      const at: Point = [Number(x), Number(y)];
      const [atX, atY] = placed(at);
      return { shape, x: atX, y: atY, at, says };
    }),
    lines: new Map(
      [...svg.matchAll(/class="line" data-of="([^"]*)" d="([^"]*)"/g)].map(([, name = '', d = '']) => [
        name,
        pointsOf(d).map(placed),
      ]),
    ),
    bands: [...svg.matchAll(/class="band" d="([^"]*)"/g)].map(([, d = '']) => pointsOf(d).map(placed)),
    whiskers: [...svg.matchAll(/class="whisker" d="M(\S+) (\S+)h10m-5 0V([\d.]+)/g)].map(
      ([, left, top, bottom]) => ({
        x: toX(Number(left) + 5),
        low: toY(Number(bottom)),
        high: toY(Number(top)),
      }),
    ),
    reaches: [...svg.matchAll(/class="reach" d="([^"]*)"/g)].flatMap(([, d = '']) =>
      [...d.matchAll(/M(\S+) (\S+)h6m-3 0V([\d.]+)/g)].map(([, left, top, bottom]) => ({
        x: toX(Number(left) + 3),
        low: toY(Number(bottom)),
        high: toY(Number(top)),
      })),
    ),
    stretches: [
      ...svg.matchAll(/class="between" x="([^"]+)" y="[^"]+" width="([^"]+)"[^>]*><title>([^<]*)/g),
    ].map(([, x, width, says = '']) => ({
      from: toX(Number(x)),
      to: toX(Number(x) + Number(width)),
      says,
    })),
    texts: [...svg.matchAll(/<text[^>]*>([^<]*)/g)].map(([, text = '']) => text),
    title: /<title id="[^"]*">([^<]*)/.exec(svg)?.[1] ?? '',
    description: /<desc id="[^"]*">([^<]*)/.exec(svg)?.[1] ?? '',
  };
}

function pointsOf(d: string): readonly Point[] {
  return [...d.matchAll(/[ML]([^,]+),([^MLZ]+)/g)].map(([, x, y]) => [Number(x), Number(y)]);
}

/** From the drawing to the axis, through its first and last tick. */
function scaleOf(svg: string, anchor: 'middle' | 'end', along: 'x' | 'y'): (place: number) => number {
  const ticks = [...svg.matchAll(/class="tick" x="([^"]+)" y="([^"]+)" text-anchor="(middle|end)">([^<]+)/g)]
    .filter(([, , , which]) => which === anchor)
    .map(([, x, y, , text = '']) => ({
      // The number of a tick stands a little below its line.
      place: along === 'x' ? Number(x) : Number(y) - 4,
      value: Number(text.replace('−', '-')),
    }));
  const [first] = ticks;
  const last = ticks.at(-1);
  if (first === undefined || last === undefined || first === last) throw new Error('an axis without ticks');
  const slope = (last.value - first.value) / (last.place - first.place);
  return (place) => first.value + slope * (place - first.place);
}
