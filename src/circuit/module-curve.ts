/**
 * A module's static voltage–current curve: the regulated line V = V0 − R·I up to its limit, and what its
 * style makes of it beyond. Volts, amperes, ohms.
 */
export interface ModuleCurve {
  readonly openCircuitVoltage: number;
  readonly droopResistance: number;
  readonly limit: CurveLimit;
  /**
   * What a higher voltage from outside drives back into the module, as ohms above its open-circuit
   * voltage. Without it nothing flows back, as from a module with its own rectifier.
   */
  readonly reverseResistance?: number;
}

export type CurveLimit =
  /**
   * Straight down: the current holds, the voltage gives way. With a `slope` (ohms, above 0) it gives way
   * by slope·(I − current).
   */
  | { readonly style: 'constant-current'; readonly current: number; readonly slope?: number }
  /** A straight line from the knee back to `shortCircuit` at 0 V. */
  | { readonly style: 'foldback'; readonly current: number; readonly shortCircuit: number }
  /** The hyperbola V·I = P through the knee. */
  | { readonly style: 'constant-power'; readonly current: number };

/**
 * One stretch of the curve between two corners, `high` being the one at the higher voltage. Within a piece
 * the current is a function of the voltage, in closed form, so whatever is solved for is solved exactly,
 * corner by corner. A current that jumps at one voltage (no droop at all) is a gap between pieces.
 */
export type CurvePiece =
  | { readonly kind: 'line'; readonly high: Corner; readonly low: Corner }
  | { readonly kind: 'hyperbola'; readonly high: Corner; readonly low: Corner; readonly power: number };

export interface Corner {
  readonly voltage: number;
  readonly current: number;
}

/** The knee: the last point of the regulated line, where the limit takes over. */
export function knee(curve: ModuleCurve): Corner {
  const voltage = curve.openCircuitVoltage - curve.droopResistance * curve.limit.current;
  return voltage >= 0
    ? { voltage, current: curve.limit.current }
    : { voltage: 0, current: curve.openCircuitVoltage / curve.droopResistance };
}

/** The whole curve from open circuit down to 0 V, highest voltage first; linear in its corners. */
export function piecesOf(curve: ModuleCurve): readonly CurvePiece[] {
  const open = { voltage: curve.openCircuitVoltage, current: 0 };
  const turn = knee(curve);
  const regulated: CurvePiece[] =
    turn.voltage < open.voltage ? [{ kind: 'line', high: open, low: turn }] : [];
  return turn.voltage > 0 ? [...regulated, beyond(curve.limit, turn)] : regulated;
}

function beyond(limit: CurveLimit, turn: Corner): CurvePiece {
  switch (limit.style) {
    case 'constant-current':
      return { kind: 'line', high: turn, low: { voltage: 0, current: currentBeyond(limit, turn, 0) } };
    case 'foldback':
      return { kind: 'line', high: turn, low: { voltage: 0, current: limit.shortCircuit } };
    case 'constant-power':
      return {
        kind: 'hyperbola',
        high: turn,
        low: { voltage: 0, current: Number.POSITIVE_INFINITY },
        power: turn.voltage * turn.current,
      };
  }
}

/** Current past a constant-current limit, where the module stands at this voltage below its knee. */
function currentBeyond(
  { slope }: Extract<CurveLimit, { style: 'constant-current' }>,
  turn: Corner,
  voltage: number,
): number {
  return slope === undefined ? turn.current : turn.current + (turn.voltage - voltage) / slope;
}

/** Current of one piece at a voltage within it. */
export function currentOn(piece: CurvePiece, voltage: number): number {
  if (piece.kind === 'hyperbola') return piece.power / voltage;
  const { high, low } = piece;
  const share = (high.voltage - voltage) / (high.voltage - low.voltage);
  return high.current + (low.current - high.current) * share;
}

/**
 * The current the module delivers when something holds it at this voltage; the larger one where the curve
 * jumps, 0 from the open-circuit voltage upward or, with a reverse resistance, what flows back (negative).
 */
export function currentAtVoltage(curve: ModuleCurve, voltage: number): number {
  if (voltage >= curve.openCircuitVoltage) {
    const { reverseResistance } = curve;
    const above = voltage - curve.openCircuitVoltage;
    return reverseResistance === undefined || above === 0 ? 0 : -above / reverseResistance;
  }
  const pieces = piecesOf(curve);
  const within = Math.max(0, voltage);
  const piece = pieces.findLast(({ high }) => high.voltage >= within);
  return piece === undefined ? 0 : currentOn(piece, within);
}

/**
 * The highest voltage at which the module delivers this current; 0 where it cannot deliver it at all.
 * On a folding-back module a second, lower voltage exists for the same current: see `operatingPoints`.
 */
export function voltageAtCurrent(curve: ModuleCurve, current: number): number {
  const turn = knee(curve);
  if (current <= turn.current) return curve.openCircuitVoltage - curve.droopResistance * Math.max(0, current);
  switch (curve.limit.style) {
    case 'constant-power':
      return (turn.voltage * turn.current) / current;
    case 'constant-current': {
      const { slope } = curve.limit;
      return slope === undefined ? 0 : Math.max(0, turn.voltage - slope * (current - turn.current));
    }
    case 'foldback':
      return 0;
  }
}

/**
 * The true dropout current: the smallest current at which the voltage has sagged by `sag`, a share of the
 * open-circuit voltage (0.05 for 5 %).
 */
export function currentAtSag(curve: ModuleCurve, sag: number): number {
  const turn = knee(curve);
  const sagged = curve.openCircuitVoltage * (1 - sag);
  if (sagged >= turn.voltage && curve.droopResistance > 0) {
    return Math.min(turn.current, (curve.openCircuitVoltage - sagged) / curve.droopResistance);
  }
  switch (curve.limit.style) {
    case 'constant-power':
      return (turn.voltage * turn.current) / sagged;
    case 'constant-current':
      return currentBeyond(curve.limit, turn, sagged);
    case 'foldback':
      return turn.current;
  }
}

/** The same module with its limit (and what follows from it) multiplied, as warming does. */
export function withLimitScaled(curve: ModuleCurve, factor: number): ModuleCurve {
  const { limit } = curve;
  const current = limit.current * factor;
  return {
    ...curve,
    limit:
      limit.style === 'foldback'
        ? { ...limit, current, shortCircuit: limit.shortCircuit * factor }
        : { ...limit, current },
  };
}
