/** A register of events: it remembers until it is read (IEEE 488.2, 11.4.2). */
export class EventRegister {
  #events: number;
  #enabled = 0;

  constructor(atPowerOn = 0) {
    this.#events = atPowerOn;
  }

  happened(bits: number): void {
    this.#events |= bits;
  }

  /** Reading clears it. */
  read(): number {
    const events = this.#events;
    this.#events = 0;
    return events;
  }

  get enabled(): number {
    return this.#enabled;
  }

  set enabled(bits: number) {
    this.#enabled = bits;
  }

  /** Whether any of the events that are enabled has happened. */
  get summary(): boolean {
    return (this.#events & this.#enabled) !== 0;
  }
}

export const operationComplete = 1;
export const powerOn = 128;

/** Of the status byte: bits 2 and 3, 7 are SCPI's, the others those of IEEE 488.2. */
export const summaries = {
  errorAvailable: 4,
  questionable: 8,
  messageAvailable: 16,
  standardEvent: 32,
  masterSummary: 64,
  operation: 128,
} as const;

/** The registers of one instrument, and the byte that sums them up. */
export class Status {
  readonly standard = new EventRegister(powerOn);
  readonly questionable = new EventRegister();
  readonly operation = new EventRegister();
  #serviceEnabled = 0;

  /** *CLS: events are forgotten, what is enabled stays. */
  clear(): void {
    for (const register of [this.standard, this.questionable, this.operation]) register.read();
  }

  /** STATus:PRESet: nothing of what SCPI adds is enabled. */
  preset(): void {
    this.questionable.enabled = 0;
    this.operation.enabled = 0;
  }

  /** Bit 6 of the service request enable register does not exist (IEEE 488.2, 11.3.2.3). */
  get serviceEnabled(): number {
    return this.#serviceEnabled;
  }

  set serviceEnabled(bits: number) {
    this.#serviceEnabled = bits & ~summaries.masterSummary;
  }

  /** What *STB? answers. */
  byte(queues: { readonly errors: boolean; readonly output: boolean }): number {
    const bits =
      (queues.errors ? summaries.errorAvailable : 0) |
      (this.questionable.summary ? summaries.questionable : 0) |
      (queues.output ? summaries.messageAvailable : 0) |
      (this.standard.summary ? summaries.standardEvent : 0) |
      (this.operation.summary ? summaries.operation : 0);
    return (bits & this.#serviceEnabled) === 0 ? bits : bits | summaries.masterSummary;
  }
}
