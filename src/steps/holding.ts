import type { Amperes, Ratio, Volts } from '../quantity/quantity.js';
import type { PointOutcome } from '../record/journal-event.js';
import type { Seen } from './point.js';

/** Part of the set current that must really flow; below it the load has lost its hold on the module. */
const followed = 0.97;
/** A load's own error at small currents, which must not count as a lost hold. */
const slack: Amperes = 0.05;
/** Part of the open-circuit voltage below which the module gives nothing to speak of. */
const gone: Ratio = 0.5;

/** The module holds while its voltage stays within the sag below the open-circuit voltage, and the current flows. */
export function holds(
  openCircuit: Volts,
  sag: Ratio,
  set: Amperes,
): (seen: Pick<Seen, 'voltage' | 'current'>) => PointOutcome {
  const least = openCircuit * (1 - sag);
  return ({ voltage, current }) => (voltage >= least && flows(set, current) ? 'held' : 'dropped');
}

/** The current that was set really flows. */
export function flows(set: Amperes, current: Amperes): boolean {
  return current >= set * followed - slack;
}

/**
 * The module's voltage is gone. An input that is off at the same time may have been the load's answer to
 * that: some let go when their voltage falls. With the voltage there, an input that is off is the load's
 * own doing, or someone's at its panel.
 */
export function isGone(voltage: Volts, openCircuit: Volts): boolean {
  return voltage < openCircuit * gone;
}
