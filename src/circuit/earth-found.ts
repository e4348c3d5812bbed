import { earthRelation, type EarthRelation, type EarthThresholds } from './earth-relation.js';
import { type EarthResistance, earthResistance, type OhmmeterPromise } from './earth-resistance.js';
import { type LeadLimits, leadsApart, leadsTogether, type OhmReadings } from './ohm-readings.js';

/** What the leads showed of themselves at one time; a part that was not looked at is undefined. */
export interface LeadsProof {
  readonly together: OhmReadings | undefined;
  readonly apart: OhmReadings | undefined;
}

/** All that was read of one module's earth. */
export interface EarthSeen {
  readonly earth: OhmReadings;
  readonly before: LeadsProof;
  readonly after: LeadsProof;
  readonly promise: OhmmeterPromise;
}

/** What a check of the isolation goes by; all in Ω. */
export type EarthLimits = EarthThresholds & LeadLimits;

/** What a reading of the earth comes to. Without leads proved both before and after, it is none. */
export type EarthFound =
  | { readonly kind: 'proved'; readonly relation: EarthRelation; readonly resistance: EarthResistance }
  | { readonly kind: 'unproved'; readonly why: string };

/**
 * The one rule for what readings of the earth are worth. A lead that broke reads like perfect isolation, so
 * the readings count only where the leads were shown to conduct and to part both before and after them.
 */
export function earthFound({ earth, before, after, promise }: EarthSeen, limits: EarthLimits): EarthFound {
  const flaw = flawIn('before', before, limits) ?? flawIn('after', after, limits);
  if (flaw !== undefined) return { kind: 'unproved', why: flaw };
  const leads = [before, after].flatMap(({ together }) => (together === undefined ? [] : [together]));
  const resistance = earthResistance(earth, leads, promise, limits);
  if (resistance === undefined)
    return { kind: 'unproved', why: 'the meter showed nothing between output and earth' };
  return { kind: 'proved', relation: earthRelation(resistance.interval, limits), resistance };
}

function flawIn(
  when: 'before' | 'after',
  { together, apart }: LeadsProof,
  limits: LeadLimits,
): string | undefined {
  const held = together === undefined ? 'sound' : leadsTogether(together, limits);
  if (held !== 'sound')
    return `held together ${when} the measurement, the leads read ${held === 'unread' ? 'nothing' : 'open'}`;
  const parted = apart === undefined ? 'sound' : leadsApart(apart, limits);
  if (parted !== 'sound')
    return `held apart ${when} the measurement, the leads read ${parted === 'unread' ? 'nothing' : 'a resistance'}`;
  return together === undefined || apart === undefined
    ? `the leads were not proved ${when} the measurement`
    : undefined;
}
