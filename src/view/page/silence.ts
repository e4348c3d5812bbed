/** After this many seconds without a word, of which there is one each second, the runner counts as lost. */
export const patience = 3;
/**
 * And after this many where it said before that a record keeps it busy, during which it says nothing: the bench was
 * left by then, and nothing on it hangs on being heard.
 */
export const patienceWhileBusy = 60;

/** How far the run is: it goes on; what its record shows is worked out; that was told, and nothing more comes. */
export type Stage = 'under-way' | 'working-out' | 'over';

/**
 * Why nothing comes: the line is open and silent; nobody answers at the address; who answers does not know this page,
 * or has enough pages.
 */
export type Why = 'silent' | 'unreachable' | 'refused' | 'full';

/** How the page stands with the runner. */
export type Line =
  | { readonly kind: 'connecting' }
  | { readonly kind: 'live' }
  /** Silence is as it should be, for a while. */
  | { readonly kind: 'working-out' }
  | { readonly kind: 'lost'; readonly seconds: number; readonly why: Why }
  /** The run ended, and said so: silence is as it should be. */
  | { readonly kind: 'over' };

export interface Hearing {
  /** When the page began to listen, in seconds of any clock that only goes forward. */
  readonly since: number;
  /** When it last heard anything. */
  readonly heard: number | undefined;
  readonly why: Why;
  readonly stage: Stage;
}

export function patienceAt(stage: Stage): number {
  return stage === 'working-out' ? patienceWhileBusy : patience;
}

export function lineOf({ since, heard, why, stage }: Hearing, now: number): Line {
  if (stage === 'over') return { kind: 'over' };
  const seconds = now - (heard ?? since);
  // Being busy is no reason for a line that breaks.
  const silence = why === 'silent' ? patienceAt(stage) : patience;
  if (seconds > silence || ((why === 'refused' || why === 'full') && heard === undefined))
    return { kind: 'lost', seconds, why };
  if (heard === undefined) return { kind: 'connecting' };
  return { kind: stage === 'working-out' ? 'working-out' : 'live' };
}
