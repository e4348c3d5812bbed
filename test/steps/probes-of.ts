import type { Stage } from './one-step.js';

/** A point of a search, as its record tells of it. */
export interface Probe {
  readonly phase: string;
  readonly set: number | undefined;
  readonly outcome: string;
}

export function probesOf({ the }: Stage): readonly Probe[] {
  const ended = the('point-ended');
  return the('point-began').map(({ phase, set }, index) => ({
    phase,
    set: set.current,
    outcome: ended[index]?.outcome ?? 'cut off',
  }));
}

export const dropoutsOf = (probes: readonly Probe[]): readonly Probe[] =>
  probes.filter(({ outcome, phase }) => outcome === 'dropped' && phase !== 'recovery');
