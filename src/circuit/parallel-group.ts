import { type Crossing, walk } from './crossings.js';
import { type LoadLaw, lawPieces } from './load-law.js';
import { type CurvePiece, type ModuleCurve, knee, piecesOf } from './module-curve.js';
import type { DemandLine, Line, Straight, Stretch } from './stretch.js';

/** One way from a module to the bus. */
export interface Branch {
  readonly source: Source;
  /** Ballast and wiring, ohms. */
  readonly resistance: number;
}

export type Source =
  | { readonly kind: 'module'; readonly curve: ModuleCurve }
  /** Gives nothing and takes nothing. */
  | { readonly kind: 'off' };

/** Where a group and its load come to rest. */
export interface GroupPoint {
  readonly busVoltage: number;
  /** What the branches deliver together. */
  readonly current: number;
  /** In the order of the group. */
  readonly branches: readonly BranchPoint[];
}

export interface BranchPoint {
  /** Negative where current flows back into the module. */
  readonly current: number;
  /** At the module's terminals, before its ballast. */
  readonly voltage: number;
}

/**
 * Where parallel modules and a load at their bus come to rest: every stable point of Σ I_k(V_bus) = I_load,
 * highest bus voltage first. There is always one. What `operatingPoints` says of one module, this says of
 * several; one branch without resistance gives the same points.
 *
 * Volts, amperes, ohms. Two modules without any resistance and of the very same voltage share in proportion
 * to what they can give there, as alike modules with ever smaller resistances would.
 */
export function groupPoints(branches: readonly Branch[], law: LoadLaw): readonly GroupPoint[] {
  const top = highestBus(branches);
  const { crossings, end } = walk(branches.map(branchLine), demandOf(law), 0, top);
  const points = crossings.filter(({ surplus }) => surplus === 'falls').map(pointAt(branches));
  return (
    end.isAbove ? [...points, pointAt(branches)({ place: top, values: end.givenWay })] : points
  ).reverse();
}

function pointAt(branches: readonly Branch[]): (crossing: Pick<Crossing, 'place' | 'values'>) => GroupPoint {
  return ({ place, values }) => {
    const points = branches.map(({ source, resistance }, index): BranchPoint => {
      const value = values[index] ?? 0;
      // The end of a line is not met to the last digit, and less than nothing flows only where it may.
      const current = letsBack(source) ? value : Math.max(0, value);
      return { current, voltage: resistance === 0 ? place : place + resistance * current };
    });
    const current = points.reduce((sum, point) => sum + point.current, 0);
    return { busVoltage: place, current, branches: points };
  };
}

function letsBack(source: Source): boolean {
  return source.kind === 'module' && source.curve.reverseResistance !== undefined;
}

/**
 * Above the highest open-circuit voltage nothing is delivered any more; and a module without any resistance
 * at all, backwards neither, lets the bus rise no higher than its own voltage.
 */
function highestBus(branches: readonly Branch[]): number {
  const curves = branches.flatMap(({ source }) => (source.kind === 'module' ? [source.curve] : []));
  const clamps = branches.flatMap(({ source, resistance }) =>
    source.kind === 'module' && source.curve.reverseResistance === 0 && resistance === 0
      ? [source.curve.openCircuitVoltage]
      : [],
  );
  return Math.min(...clamps, Math.max(0, ...curves.map(({ openCircuitVoltage }) => openCircuitVoltage)));
}

function demandOf(law: LoadLaw): DemandLine {
  const [first, ...others] = lawPieces(law).map(({ from, atZero, slope }): Straight => ({
    kind: 'straight',
    from,
    start: atZero + slope * from,
    slope,
  }));
  return [first ?? { kind: 'straight', from: 0, start: 0, slope: 0 }, ...others];
}

/**
 * What a branch delivers over the voltage of the bus: its module's curve, every corner of it lowered by what
 * is lost in the resistance. From 0 V upward that has one current for each voltage, even behind a foldback:
 * the lines that would fold over lie below 0 V.
 */
function branchLine({ source, resistance }: Branch): Line {
  if (source.kind === 'off') return [{ kind: 'straight', from: 0, start: 0, slope: 0 }];
  const { curve } = source;
  const [lowest, ...higher] = [...stiffPiece(curve), ...piecesOf(curve)]
    .toReversed()
    .flatMap((piece) => stretchOf(piece, resistance));
  const above = backwards(curve, resistance);
  return lowest === undefined ? [above] : [lowest, ...higher, above];
}

/**
 * Without droop, or with so little that it is lost in the last digit of the voltage, the regulated line is one
 * voltage for all currents; only a ballast makes a slope of it.
 */
function stiffPiece(curve: ModuleCurve): readonly CurvePiece[] {
  const low = knee(curve);
  if (low.voltage < curve.openCircuitVoltage) return [];
  return [{ kind: 'line', high: { voltage: curve.openCircuitVoltage, current: 0 }, low }];
}

function stretchOf(piece: CurvePiece, resistance: number): readonly Stretch[] {
  const { high, low } = piece;
  const to = high.voltage - resistance * high.current;
  const lowered = low.voltage === 0 ? 0 : Math.max(0, low.voltage - resistance * low.current);
  if (to <= lowered) return [];
  if (piece.kind === 'hyperbola') return [hyperbola(piece.power, lowered, resistance)];
  const lossless = high.voltage - low.voltage;
  const slope = (high.current - low.current) / (lossless - resistance * (high.current - low.current));
  return [{ kind: 'straight', from: lowered, start: high.current + slope * (lowered - to), slope }];
}

/** (V_bus + r·I)·I = P, in the form of the quadratic's root that loses no digits. */
function hyperbola(power: number, from: number, resistance: number): Stretch {
  return {
    kind: 'bent',
    from,
    at: (bus) => {
      const root = Math.sqrt(bus * bus + 4 * resistance * power);
      const current = (2 * power) / (bus + root);
      return { value: current, slope: -current / root };
    },
  };
}

function backwards({ openCircuitVoltage, reverseResistance }: ModuleCurve, resistance: number): Straight {
  const none = { kind: 'straight', from: openCircuitVoltage, start: 0, slope: 0 } as const;
  if (reverseResistance === undefined) return none;
  const total = reverseResistance + resistance;
  return total > 0 ? { ...none, slope: -1 / total } : { ...none, start: Number.NEGATIVE_INFINITY };
}
