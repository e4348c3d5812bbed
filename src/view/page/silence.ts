/** After this many seconds without a word, of which there is one each second, the runner counts as lost. */
export const patience = 3;

/**
 * Why nothing comes: the line is open and silent; nobody answers at the address; who answers does not know this page,
 * or has enough pages.
 */
export type Why = 'silent' | 'unreachable' | 'refused' | 'full';

/** How the page stands with the runner. */
export type Line =
  | { readonly kind: 'connecting' }
  | { readonly kind: 'live' }
  | { readonly kind: 'lost'; readonly seconds: number; readonly why: Why }
  /** The run ended, and said so: silence is as it should be. */
  | { readonly kind: 'over' };

export interface Hearing {
  /** When the page began to listen, in seconds of any clock that only goes forward. */
  readonly since: number;
  /** When it last heard anything. */
  readonly heard: number | undefined;
  readonly why: Why;
  readonly ended: boolean;
}

export function lineOf({ since, heard, why, ended }: Hearing, now: number): Line {
  if (ended) return { kind: 'over' };
  const seconds = now - (heard ?? since);
  if (seconds > patience || ((why === 'refused' || why === 'full') && heard === undefined))
    return { kind: 'lost', seconds, why };
  return { kind: heard === undefined ? 'connecting' : 'live' };
}
