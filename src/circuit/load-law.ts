/**
 * What a load asks of the module, seen at the module: the leads (there and back) are part of it.
 * Volts, amperes, ohms.
 */
export type LoadLaw =
  | { readonly kind: 'open' }
  /**
   * Sinks `current`; below `leastVoltage` at its own terminals it can only conduct fully, as a resistor,
   * and sinks the share current·V/leastVoltage.
   */
  | {
      readonly kind: 'current';
      readonly current: number;
      readonly leastVoltage: number;
      readonly leads: number;
    }
  /** Holds `voltage` at its own terminals and takes whatever current that needs. */
  | { readonly kind: 'voltage'; readonly voltage: number; readonly leads: number }
  /** A plain resistor. */
  | { readonly kind: 'resistance'; readonly resistance: number; readonly leads: number };

/** A stretch of the law in which the current is a straight line in the module's voltage: a + b·V. */
export interface LawPiece {
  readonly from: number;
  readonly to: number;
  readonly atZero: number;
  readonly slope: number;
}

/** The law in pieces, lowest voltage first, the last one without end; the current never falls as V rises. */
export function lawPieces(law: LoadLaw): readonly LawPiece[] {
  const endless = Number.POSITIVE_INFINITY;
  switch (law.kind) {
    case 'open':
      return [{ from: 0, to: endless, atZero: 0, slope: 0 }];
    case 'current': {
      const full = saturationVoltage(law);
      if (law.current === 0 || full === 0) return [{ from: 0, to: endless, atZero: law.current, slope: 0 }];
      return [
        { from: 0, to: full, atZero: 0, slope: law.current / full },
        { from: full, to: endless, atZero: law.current, slope: 0 },
      ];
    }
    case 'voltage': {
      const none = { from: 0, to: law.voltage, atZero: 0, slope: 0 };
      const held =
        law.leads > 0
          ? { from: law.voltage, to: endless, atZero: -law.voltage / law.leads, slope: 1 / law.leads }
          : { from: law.voltage, to: endless, atZero: endless, slope: 0 };
      return law.voltage > 0 ? [none, held] : [held];
    }
    case 'resistance': {
      const total = law.resistance + law.leads;
      return [{ from: 0, to: endless, atZero: total > 0 ? 0 : endless, slope: total > 0 ? 1 / total : 0 }];
    }
  }
}

/** The module's voltage below which a constant-current load no longer sinks its current. */
export function saturationVoltage(law: Extract<LoadLaw, { kind: 'current' }>): number {
  return law.leastVoltage + law.current * law.leads;
}

/**
 * The law the other way round, for what stands in series: to pass the current I the load needs the voltage
 * atZero + slope·I, and however high the voltage it passes no more than `most`.
 */
export interface Need {
  readonly atZero: number;
  readonly slope: number;
  readonly most: number;
}

/** The voltage that the load needs to pass a current. */
export function needOf(law: LoadLaw): Need {
  const endless = Number.POSITIVE_INFINITY;
  switch (law.kind) {
    case 'open':
      return { atZero: 0, slope: 0, most: 0 };
    case 'current':
      return {
        atZero: 0,
        slope: law.current > 0 ? saturationVoltage(law) / law.current : 0,
        most: law.current,
      };
    case 'voltage':
      return { atZero: law.voltage, slope: law.leads, most: endless };
    case 'resistance':
      return { atZero: 0, slope: law.resistance + law.leads, most: endless };
  }
}

/** The current the law draws when the module stands at this voltage. */
export function currentDrawn(law: LoadLaw, voltage: number): number {
  const piece = lawPieces(law).findLast(({ from }) => voltage >= from);
  return piece === undefined ? 0 : piece.atZero + piece.slope * voltage;
}
