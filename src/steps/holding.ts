import type { Amperes, Ratio, Volts } from '../quantity/quantity.js';
import type { PointOutcome } from '../record/journal-event.js';
import type { Seen } from './point.js';

/** Part of the set current that must really flow; below it the load has lost its hold on the module. */
const followed = 0.97;
/** A load's own error at small currents, which must not count as a lost hold. */
const slack: Amperes = 0.05;

/**
 * The module holds while its voltage stays within the sag below the open-circuit voltage, and the current
 * that was set really flows. A voltage that could not be read counts as not held.
 */
export function holds(openCircuit: Volts, sag: Ratio, set: Amperes): (seen: Seen) => PointOutcome {
  const least = openCircuit * (1 - sag);
  return ({ voltage, current }) =>
    voltage >= least && current >= set * followed - slack ? 'held' : 'dropped';
}
