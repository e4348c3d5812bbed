import { walk } from './crossings.js';
import { type LoadLaw, needOf } from './load-law.js';
import { forwardCurrent } from './shockley-diode.js';
import { type DemandLine, type Line, onStretch } from './stretch.js';
import { type Fold, type Link, foldOf, foldingLine, linkLine } from './string-link.js';

export type { Link, LinkSource } from './string-link.js';

/** Where a string and its load come to rest. */
export interface StringPoint {
  /** From the string's 0 V to its upper end. */
  readonly voltage: number;
  readonly current: number;
  /** In the order of the string, the lowest first. */
  readonly links: readonly LinkPoint[];
}

export interface LinkPoint {
  /** At the module's output; negative where the others drive it backwards. */
  readonly voltage: number;
  /** Through the module itself, … */
  readonly current: number;
  /** … and past it, through its diode. */
  readonly diodeCurrent: number;
}

/**
 * Where modules in series and a load come to rest: Σ (V_k(I) − R_k·I) is what the load needs to pass I. Where
 * there are several such points (a folding-back module among the links), the one of the highest voltage. Of
 * several that would fold back at the very same current the lowest does: which of them is not Kirchhoff's to say.
 *
 * Volts, amperes, ohms. A link without an end to its fall (a vertical limit, no diode) is driven below 0 V as
 * far as the others and the load will have it; several such at once share that equally. A link that is open
 * and has no diode stops the whole string: no current, and the voltage of all the others stands across it,
 * backwards.
 */
export function stringPoint(links: readonly Link[], law: LoadLaw): StringPoint {
  const open = links.filter(stops).length;
  if (open > 0) return stopped(links, open);
  const need = needOf(law);
  const demand: DemandLine = [
    { kind: 'straight', from: 0, start: need.atZero, slope: need.slope + seriesResistance(links) },
  ];
  const fallen = new Map<number, Fold>();
  let from = 0;
  for (;;) {
    const weakest = weakestStanding(links, fallen);
    const lines = links.map((link, index) => linkLine(link, fallen.has(index) ? 'fallen' : 'standing'));
    const most = Math.min(need.most, weakest?.fold.current ?? endOf(lines, demand));
    const up = walk(lines, demand, from, most);
    const rest = up.crossings.find(({ surplus }) => surplus === 'falls');
    if (rest !== undefined) return pointAt(links, rest.place, rest.values);
    if (weakest === undefined || need.most <= most) return pointAt(links, most, up.end.values);

    // More is asked than the weakest can hold: it folds back, and the current of the whole string with it.
    const { index, fold } = weakest;
    const folding = lines.map((line, other) => (other === index ? foldingLine(fold) : line));
    const back = walk(folding, demand, fold.shortCircuit, most);
    const folded = back.crossings.findLast(({ surplus }) => surplus === 'rises');
    if (folded !== undefined) return pointAt(links, folded.place, folded.values);

    // Down there others may stand again. It ends: only a fall at a smaller current lets any of them up.
    for (const [other, { shortCircuit }] of fallen) {
      if (shortCircuit > fold.shortCircuit) fallen.delete(other);
    }
    fallen.set(index, fold);
    from = fold.shortCircuit;
  }
}

function stops({ source, diode }: Link): boolean {
  return source.kind === 'off' && source.outputResistance === Number.POSITIVE_INFINITY && diode === undefined;
}

function stopped(links: readonly Link[], open: number): StringPoint {
  const idle = links.map((link) =>
    stops(link) ? undefined : onStretch(linkLine(link, 'standing')[0], 0).value,
  );
  const across = -idle.reduce<number>((sum, voltage = 0) => sum + voltage, 0) / open;
  return pointAt(
    links,
    0,
    idle.map((voltage = across) => voltage),
  );
}

function seriesResistance(links: readonly Link[]): number {
  return links.reduce((sum, { resistance = 0 }) => sum + resistance, 0);
}

/** The folding-back link that gives up first as the current rises. */
function weakestStanding(
  links: readonly Link[],
  fallen: ReadonlyMap<number, Fold>,
): { readonly index: number; readonly fold: Fold } | undefined {
  let weakest: { readonly index: number; readonly fold: Fold } | undefined;
  for (const [index, link] of links.entries()) {
    const fold = fallen.has(index) ? undefined : foldOf(link);
    if (fold !== undefined && !(weakest !== undefined && weakest.fold.current <= fold.current)) {
      weakest = { index, fold };
    }
  }
  return weakest;
}

/** A current, beyond every corner, at which the string has no voltage left for the load. */
function endOf(lines: readonly Line[], [need]: DemandLine): number {
  const corners = lines.flat().flatMap(({ from }) => (Number.isFinite(from) ? [from] : []));
  let end = Math.max(1, ...corners);
  const isLeft = (): boolean => {
    const left = lines.reduce((sum, line) => sum + onStretch(line.at(-1) ?? line[0], end).value, 0);
    return left >= onStretch(need, end).value;
  };
  // Only constant power on a dead short goes on and on.
  do end *= 2;
  while (isLeft() && end < Number.MAX_VALUE / 2);
  return end;
}

function pointAt(links: readonly Link[], current: number, voltages: readonly number[]): StringPoint {
  const points = links.map(({ diode }, index): LinkPoint => {
    const voltage = voltages[index] ?? 0;
    const diodeCurrent =
      diode !== undefined && voltage < 0 ? Math.min(current, forwardCurrent(diode, -voltage)) : 0;
    return { voltage, current: current - diodeCurrent, diodeCurrent };
  });
  const voltage = points.reduce((sum, point) => sum + point.voltage, 0) - seriesResistance(links) * current;
  return { voltage, current, links: points };
}
