/** Time as the tool sees it: handed in everywhere, so that an hour of soak can pass in a moment. */
export interface Clock {
  /** Monotonic seconds since some fixed moment. */
  now(): number;
  /** The wall clock, for the one place in a record that names a date. */
  wall(): Date;
  /** Waits, never less than that; rejects with the signal's reason when it is aborted first. */
  sleep(seconds: number, signal?: AbortSignal): Promise<void>;
}

/** A clock that can be set forward to a moment that is known to the last digit. */
export interface SettableClock extends Clock {
  /** It is exactly that moment now, or a later one already. */
  reach(moment: number): void;
}

export function isSettable(clock: Clock): clock is SettableClock {
  return 'reach' in clock;
}
