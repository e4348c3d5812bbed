import { WrongPlaceError } from '../bench/wrong-place-error.js';
import type { LeadsProof } from '../circuit/earth-found.js';
import { type LeadLimits, leadsApart, leadsTogether, type OhmReadings } from '../circuit/ohm-readings.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Ohms, Seconds } from '../quantity/quantity.js';
import { askToDo } from './ask-to-do.js';
import * as ask from './isolation-prompts.js';
import type { MeterPoints } from './meter-points.js';
import type { StepContext } from './step-kind.js';

/**
 * Shows that the meter's leads conduct when their tips touch, and don't when they don't. A lead that is broken
 * reads like perfect isolation; leads that touch each other read like a bond.
 * @throws WrongPlaceError `lead-open`, `lead-shorted`
 */
export async function proveLeads(
  context: StepContext,
  points: MeterPoints,
  given: LeadLimits & { readonly dwell: Seconds; readonly readings: number },
  when: 'before' | 'after',
): Promise<LeadsProof> {
  await points.measure('resistance');
  const plan = { dwell: given.dwell, readings: given.readings };
  await askToDo(context, ask.leadsTogether(when, context.underTest.modules));
  context.bench.places.movedTo('leads');
  const together = await points.resistance({ phase: 'leads-together', ...plan });
  if (leadsTogether(together, given) !== 'sound') throw leadOpen(together, when, given);
  await askToDo(context, ask.leadsApart);
  const apart = await points.resistance({ phase: 'leads-apart', ...plan });
  if (leadsApart(apart, given) !== 'sound') throw leadShorted(apart, when);
  return { together, apart };
}

function leadOpen(
  { values, open }: OhmReadings,
  when: 'before' | 'after',
  given: LeadLimits,
): WrongPlaceError {
  const read = open > 0 ? 'open' : shown(values.maximum);
  return new WrongPlaceError(
    'lead-open',
    `held together ${when} the measurement, the meter's leads read ${read} instead of less than ${shown(given.leadResistanceBelow)}${unbelieved(when)}`,
    'a lead is broken, a plug is out of the meter or the tips did not touch: mend that and begin again; the module is still unplugged',
  );
}

function leadShorted({ values }: OhmReadings, when: 'before' | 'after'): WrongPlaceError {
  return new WrongPlaceError(
    'lead-shorted',
    `held apart ${when} the measurement, the meter's leads read ${shown(values.minimum)} instead of open${unbelieved(when)}`,
    'the tips touched something, or the leads are in the wrong sockets of the meter: begin again; the module is still unplugged',
  );
}

function unbelieved(when: 'before' | 'after'): string {
  return when === 'after' ? '; what was measured with them does not count' : '';
}

function shown(ohms: Ohms): string {
  return formatQuantity(ohms, 'resistance', { significant: 3 });
}
