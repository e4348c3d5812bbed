import type { RunningMoments } from '../statistics/running-moments.js';

/** What an ohmmeter showed at one place: its values, and how often it showed open. */
export interface OhmReadings {
  /** In Ω. */
  readonly values: RunningMoments;
  readonly open: number;
}

/** In Ω. */
export interface LeadLimits {
  /** Leads that are sound and held together read less. */
  readonly leadResistanceBelow: number;
  /** What the meter shows as open is at least this much: the top of its widest range. */
  readonly openAbove: number;
}

/** What leads, held together or apart, show of themselves; `unread` where nothing was read. */
export type LeadsShown = 'sound' | 'open' | 'shorted' | 'unread';

/** Leads whose tips touch must read next to nothing, each time: else one of them is broken, or a probe is out. */
export function leadsTogether(
  { values, open }: OhmReadings,
  { leadResistanceBelow }: Pick<LeadLimits, 'leadResistanceBelow'>,
): LeadsShown {
  if (open > 0) return 'open';
  if (values.count === 0) return 'unread';
  const largest = Math.max(Math.abs(values.minimum), Math.abs(values.maximum));
  return largest < leadResistanceBelow ? 'sound' : 'open';
}

/** Leads whose tips touch nothing must read open, each time: else something between them conducts. */
export function leadsApart(
  { values, open }: OhmReadings,
  { openAbove }: Pick<LeadLimits, 'openAbove'>,
): LeadsShown {
  if (values.count === 0) return open > 0 ? 'sound' : 'unread';
  return values.minimum > openAbove ? 'sound' : 'shorted';
}
