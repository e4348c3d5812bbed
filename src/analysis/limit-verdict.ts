/** How a module limits, or that it can't be told, and what speaks for it. */
export interface Verdict {
  readonly style:
    'latch-off' | 'hiccup' | 'constant-power' | 'constant-current' | 'foldback' | 'undetermined';
  readonly because: string;
}

/** The part of a fall beyond which the droop is all of it; a limit just met takes the rest. */
export const droopAlone = 0.8;
