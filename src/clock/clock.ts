/** Time as the tool sees it: handed in everywhere, so that an hour of soak can pass in a moment. */
export interface Clock {
  /** Monotonic seconds since some fixed moment. */
  now(): number;
  /** The wall clock, for the one place in a record that names a date. */
  wall(): Date;
  /** Waits; rejects with the signal's reason when it is aborted first. */
  sleep(seconds: number, signal?: AbortSignal): Promise<void>;
}
