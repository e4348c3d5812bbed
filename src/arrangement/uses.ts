import type { ModuleProfile } from './module-profile.js';
import type { RecordSource } from './understood-record.js';

/** A record that something of a profile was taken from. */
export interface Use {
  readonly from: RecordSource;
  /** Whether nothing can be decided where it does not count: its line, its limit, its earth, what it is recommended for. */
  readonly decides: boolean;
  /** The same, but for a change made since: one that only lowers the recommendation may be out of date. */
  readonly mustBeFresh: boolean;
}

/** The records that a profile rests on, each once. */
export function usesOf(profile: Omit<ModuleProfile, 'concerns'>): readonly Use[] {
  const { openCircuit, droop, usable, recommended, dropout, shortCircuit, limitStyle, earth } = profile;
  const all = [
    ...[openCircuit, droop, usable, earth].map((taken) => ({ taken, decides: true, mustBeFresh: true })),
    { taken: recommended, decides: true, mustBeFresh: false },
    ...[dropout, shortCircuit, limitStyle].map((taken) => ({ taken, decides: false, mustBeFresh: false })),
  ].flatMap(({ taken, ...rest }) => (taken === undefined ? [] : [{ from: taken.from, ...rest }]));
  const byRun = new Map<string, Use>();
  for (const use of all) {
    const earlier = byRun.get(use.from.run) ?? use;
    byRun.set(use.from.run, {
      from: use.from,
      decides: earlier.decides || use.decides,
      mustBeFresh: earlier.mustBeFresh || use.mustBeFresh,
    });
  }
  return [...byRun.values()];
}
