import type uPlot from '/uplot.js';
import type { Chart, Mark, MarkLook } from './chart-choice.js';

interface MarkPath {
  /** In the legend: a piece of the line, and the sign upon it. */
  readonly line: string;
  readonly sign: string;
  readonly series: string;
  readonly colour: string;
  readonly dash: readonly number[];
}

/** Each look has its own sign and its own line; the colour comes on top. */
export const markPaths: Readonly<Record<MarkLook, MarkPath>> = {
  held: {
    line: 'M0 7H36',
    sign: 'M14 7a4 4 0 1 0 8 0a4 4 0 1 0 -8 0',
    series: 'k0',
    colour: 'line-0',
    dash: [],
  },
  back: { line: 'M0 7H8M28 7H36', sign: 'M14 3H22V11H14Z', series: 'k1', colour: 'line-1', dash: [7, 4] },
  dropped: { line: '', sign: 'M13 2L23 12M23 2L13 12', series: 'k2', colour: 'bad', dash: [] },
};

/** Of more the line alone is drawn, or it would be a caterpillar. */
const mostSigns = 60;

/** Draws the marks in the order in which they were taken; what lies below the frame at its lower edge. */
export function drawMarks(plot: uPlot, { marks, rated }: Chart, colour: (name: string) => string): void {
  const { ctx, bbox } = plot;
  const ratio = bbox.width / plot.over.clientWidth;
  const at = ({ x, y }: Pick<Mark, 'x' | 'y'>): readonly [number, number] => [
    plot.valToPos(x, 'x', true),
    Math.min(bbox.top + bbox.height - 6 * ratio, Math.max(bbox.top + 6 * ratio, plot.valToPos(y, 'y', true))),
  ];
  ctx.save();
  if (rated !== undefined) drawRated(plot, rated, ratio, colour);
  for (const [index, mark] of marks.entries()) {
    const before = marks[index - 1];
    if (!mark.joined || before === undefined) continue;
    const { colour: name, dash } = markPaths[mark.look];
    ctx.strokeStyle = colour(name);
    ctx.lineWidth = 2 * ratio;
    ctx.setLineDash(dash.map((length) => length * ratio));
    ctx.beginPath();
    ctx.moveTo(...at(before));
    ctx.lineTo(...at(mark));
    ctx.stroke();
  }
  ctx.setLineDash([]);
  for (const [index, mark] of marks.entries()) {
    const isLast = index === marks.length - 1;
    if (marks.length > mostSigns && mark.joined && !isLast) continue;
    drawSign(ctx, at(mark), mark.look, ratio, colour, isLast);
  }
  ctx.restore();
}

function drawSign(
  ctx: CanvasRenderingContext2D,
  [x, y]: readonly [number, number],
  look: MarkLook,
  ratio: number,
  colour: (name: string) => string,
  isLast: boolean,
): void {
  const size = (isLast ? 5.5 : 3.5) * ratio;
  ctx.strokeStyle = colour(markPaths[look].colour);
  ctx.fillStyle = isLast ? ctx.strokeStyle : colour('paper');
  ctx.lineWidth = 1.8 * ratio;
  ctx.beginPath();
  if (look === 'dropped') {
    ctx.moveTo(x - size, y - size);
    ctx.lineTo(x + size, y + size);
    ctx.moveTo(x + size, y - size);
    ctx.lineTo(x - size, y + size);
  } else if (look === 'back') ctx.rect(x - size, y - size, 2 * size, 2 * size);
  else ctx.arc(x, y, size, 0, 2 * Math.PI);
  if (look !== 'dropped') ctx.fill();
  ctx.stroke();
}

function drawRated(plot: uPlot, rated: number, ratio: number, colour: (name: string) => string): void {
  const { ctx, bbox } = plot;
  const x = plot.valToPos(rated, 'x', true);
  ctx.strokeStyle = colour('ink');
  ctx.lineWidth = ratio;
  ctx.setLineDash([3 * ratio, 3 * ratio]);
  ctx.beginPath();
  ctx.moveTo(x, bbox.top);
  ctx.lineTo(x, bbox.top + bbox.height);
  ctx.stroke();
  ctx.setLineDash([]);
  ctx.fillStyle = colour('ink');
  ctx.font = `${13 * ratio}px system-ui, "Liberation Sans", sans-serif`;
  // Above the frame, where no mark can lie under it.
  ctx.textAlign = 'right';
  ctx.fillText(
    `nameplate ${rated} A`,
    Math.min(bbox.left + bbox.width, x + 40 * ratio),
    bbox.top - 6 * ratio,
  );
}
