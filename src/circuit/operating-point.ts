import { type LawPiece, type LoadLaw, lawPieces } from './load-law.js';
import {
  type Corner,
  type CurvePiece,
  type ModuleCurve,
  currentAtVoltage,
  currentOn,
  piecesOf,
} from './module-curve.js';

/**
 * Where a module and a load come to rest: every stable point that satisfies both the module's curve and the
 * load's law, highest voltage first. There is always one; a folding-back module on a constant-current load
 * has two (which of them holds depends on what went before).
 *
 * Both are walked together by their corners from 0 V upward. Within each interval the surplus (what the
 * module can deliver less what the load draws) has a closed-form zero; a zero is stable where the surplus
 * falls as the voltage rises. Linear in the number of corners. `groupPoints` of one branch says the same to the
 * twelfth digit; this is some six times as fast, and a search for a dropout asks for little else.
 */
export function operatingPoints(curve: ModuleCurve, law: LoadLaw): readonly Corner[] {
  const points: Corner[] = [];
  let surplusBelow = true;
  let delivered = currentAtVoltage(curve, 0);
  for (const interval of intervals(piecesOf(curve).toReversed(), lawPieces(law))) {
    const { piece, draw, from, to } = interval;
    const drawnAtFrom = draw.atZero + draw.slope * from;
    const deliveredAtFrom = currentOn(piece, from);
    if (surplusBelow && deliveredAtFrom < drawnAtFrom) {
      points.push({ voltage: from, current: Math.min(delivered, drawnAtFrom) });
    }
    const surplusAtFrom = deliveredAtFrom >= drawnAtFrom;
    delivered = currentOn(piece, to);
    const surplusAtTo = delivered >= draw.atZero + draw.slope * to;
    if (surplusAtFrom && !surplusAtTo) points.push(zeroWithin(interval));
    surplusBelow = surplusAtTo;
  }
  if (surplusBelow) {
    const voltage = curve.openCircuitVoltage;
    const last = lawPieces(law).findLast(({ from }) => voltage > from || from === 0);
    points.push({ voltage, current: last === undefined ? 0 : last.atZero + last.slope * voltage });
  }
  return points.reverse();
}

interface Interval {
  readonly piece: CurvePiece;
  readonly draw: LawPiece;
  readonly from: number;
  readonly to: number;
}

function* intervals(pieces: readonly CurvePiece[], draws: readonly LawPiece[]): Generator<Interval> {
  for (const piece of pieces) {
    for (const draw of draws) {
      const from = Math.max(piece.low.voltage, draw.from);
      const to = Math.min(piece.high.voltage, draw.to);
      if (from < to) yield { piece, draw, from, to };
    }
  }
}

function zeroWithin({ piece, draw, from, to }: Interval): Corner {
  const voltage =
    piece.kind === 'hyperbola'
      ? onHyperbola(piece.power, draw)
      : onLine(from, currentOn(piece, from), to, currentOn(piece, to), draw);
  const inside = Math.min(to, Math.max(from, voltage));
  return { voltage: inside, current: currentOn(piece, inside) };
}

function onLine(from: number, currentFrom: number, to: number, currentTo: number, draw: LawPiece): number {
  const surplusFrom = currentFrom - (draw.atZero + draw.slope * from);
  const surplusTo = currentTo - (draw.atZero + draw.slope * to);
  return from + ((to - from) * surplusFrom) / (surplusFrom - surplusTo);
}

/** P/V = a + b·V, in the form of the quadratic's root that loses no digits. */
function onHyperbola(power: number, { atZero, slope }: LawPiece): number {
  if (slope === 0) return power / atZero;
  const root = Math.sqrt(atZero * atZero + 4 * slope * power);
  return atZero >= 0 ? (2 * power) / (atZero + root) : (root - atZero) / (2 * slope);
}
