/** Whether a requirement on a finding is met, the uncertainty being on the safe side (JCGM 106, ILAC-G8). */
export interface Decision {
  readonly finding: string;
  /** As a person reads it: `at least 4 A (100 % of rated-current)`. */
  readonly requirement: string;
  readonly outcome: Outcome;
  /** That the true value meets the requirement; null where there is nothing to compute it from. */
  readonly probability: number | null;
  readonly note: string;
}

export type Outcome = 'conforms' | 'does-not-conform' | 'undecided';

/** The worst of what was decided; a record of which nothing is required is not judged. */
export function overall(decisions: readonly { readonly outcome: Outcome }[]): Outcome | 'not-judged' {
  if (decisions.length === 0) return 'not-judged';
  if (decisions.some((decision) => decision.outcome === 'does-not-conform')) return 'does-not-conform';
  return decisions.some((decision) => decision.outcome === 'undecided') ? 'undecided' : 'conforms';
}
