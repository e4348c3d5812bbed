/**
 * A diode by Shockley's law, I = I_s·(exp(V/(n·kT/q)) − 1): amperes and kelvins, forward voltage and current
 * positive.
 */
export interface ShockleyDiode {
  readonly saturationCurrent: number;
  readonly idealityFactor: number;
  readonly temperature: number;
}

/** Exact by the definition of the SI units since 2019 (CODATA 2018). */
const BOLTZMANN = 1.380649e-23;
const ELEMENTARY_CHARGE = 1.602176634e-19;

/** n·kT/q: some 26 mV at room temperature for an ideal junction. */
export function thermalVoltage({ idealityFactor, temperature }: ShockleyDiode): number {
  return (idealityFactor * BOLTZMANN * temperature) / ELEMENTARY_CHARGE;
}

/** The forward voltage at a forward current from 0 upward. */
export function forwardVoltage(diode: ShockleyDiode, current: number): number {
  return thermalVoltage(diode) * Math.log1p(current / diode.saturationCurrent);
}

/** The forward current at a voltage. */
export function forwardCurrent(diode: ShockleyDiode, voltage: number): number {
  return diode.saturationCurrent * Math.expm1(voltage / thermalVoltage(diode));
}
