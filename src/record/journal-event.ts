import type { Amperes, Dimension, Seconds, Volts } from '../quantity/quantity.js';

/**
 * The journal: one JSON object a line, in the order in which things happened. `t` is monotonic seconds
 * since the run began; the wall clock stands once, in `opened`. Steps, points and samples count from 1.
 * All values are in the units V, A, Ω, °C, s.
 */
export type JournalEvent =
  | Opened
  | Resumed
  | InstrumentAnswered
  | CautionAcknowledged
  | StepBegan
  | PointBegan
  | ReadingTaken
  | PointEnded
  | InputChanged
  | Recovery
  | Prompted
  | Answered
  | Noticed
  | GuardTripped
  | StepEnded
  | Ended;

export const journalFormat = 'railproof/journal 1';

export interface Opened {
  readonly event: 'opened';
  readonly format: typeof journalFormat;
  /** ISO 8601, UTC. */
  readonly wallClock: string;
  /** SHA-256 of run.json, so that what was planned can't be changed afterwards unnoticed either. */
  readonly header: string;
}

/**
 * The run goes on where an earlier one was broken off. The events of the steps that were done then follow, as
 * that record holds them with its times, up to the last of them; what comes after was measured in this run.
 */
export interface Resumed {
  readonly event: 'resumed';
  /** The name of the earlier record's folder. */
  readonly run: string;
  /** SHA-256 of the earlier run.json. */
  readonly header: string;
  /** ISO 8601, UTC: when the earlier run began. */
  readonly began: string;
  /** How many steps were done then. */
  readonly steps: number;
}

export interface InstrumentAnswered {
  readonly event: 'instrument';
  readonly role: string;
  readonly address: string;
  readonly identity: string;
}

/** Who took note of a caution: a person, the one who wrote `--yes`, or the operator of a simulated bench. */
export type Acknowledgement = 'operator' | '--yes' | 'simulated-operator';

export interface CautionAcknowledged {
  readonly event: 'caution';
  readonly name: string;
  readonly by: Acknowledgement;
}

export interface StepBegan {
  readonly event: 'step-began';
  readonly step: number;
  readonly kind: string;
}

/**
 * What a point is for: `idle` input off; `ramp` on the way up, `down` on the way back; `start`, `climb`,
 * `halve` and `return` belong to a search; `steadiness` looks for the first unsteady current; `overload` is
 * watched past the limit; `recovery` is after it; `trace` holds a voltage; `soak` is one look of a long hold;
 * `share` and `stack` read every place of a circuit; `proof` shows that what measures is where it should be;
 * `leads-apart`, `leads-together`, `discharge` and `earth` belong to the check of the isolation.
 */
export const phases = [
  'idle',
  'ramp',
  'down',
  'start',
  'climb',
  'halve',
  'return',
  'steadiness',
  'overload',
  'recovery',
  'trace',
  'soak',
  'share',
  'stack',
  'proof',
  'leads-apart',
  'leads-together',
  'discharge',
  'earth',
] as const;
export type Phase = (typeof phases)[number];

/** What the load was set to; nothing where its input is off. */
export interface SetPoint {
  readonly current?: Amperes;
  readonly voltage?: Volts;
}

export interface PointBegan {
  readonly event: 'point-began';
  readonly step: number;
  readonly point: number;
  readonly phase: Phase;
  readonly set: SetPoint;
  /** The module that the point is about, where it is about one of several: whose input was taken away, whose earth is measured. */
  readonly of?: string;
}

export interface ReadingTaken {
  readonly event: 'reading';
  readonly step: number;
  readonly point: number;
  readonly sample: number;
  /** The instrument's post on the bench. */
  readonly of: string;
  readonly what: string;
  /** Where its probes were, when not at their usual place: `ballast-of-K1`, `output-of-K1`, `earth-of-K1`, `leads`. */
  readonly at?: string;
  /** Null when the instrument said that it has no value. */
  readonly value: number | null;
  readonly problem?: 'overload' | 'not-a-number';
}

/** `held`: the module kept its voltage and the load its current; `dropped`: not so. */
export type PointOutcome = 'held' | 'dropped' | 'measured';

/** A connection was lost in the middle of the point: what it read counts for nothing, and it is taken again. */
export type Interrupted = 'interrupted';

export interface PointEnded {
  readonly event: 'point-ended';
  readonly step: number;
  readonly point: number;
  readonly outcome: PointOutcome | Interrupted;
}

/**
 * Before the input is switched on this says `on`, unconfirmed, so that no record is without it; what the load
 * says afterwards comes as another one.
 */
export interface InputChanged {
  readonly event: 'input';
  readonly state: 'on' | 'off';
  /** Read back from the load. */
  readonly confirmed: boolean;
}

/** After an overload was taken away: back between `after` and `within` seconds, or not back in time. */
export interface Recovery {
  readonly event: 'recovery';
  readonly step: number;
  readonly outcome: 'came-back' | 'stayed-off' | 'came-back-after-cycling';
  readonly after: Seconds;
  readonly within: Seconds;
  /** A connection was lost meanwhile: it is between the two, but how long it took was not seen. */
  readonly untimed?: true;
}

export interface Prompted {
  readonly event: 'prompt';
  readonly step: number;
  readonly text: string;
  readonly act?: string;
}

export interface Answered {
  readonly event: 'answer';
  readonly step: number;
  readonly name: string;
  readonly answer: string;
  /** Where a quantity was asked for. */
  readonly value?: number;
  readonly dimension?: Dimension;
}

export interface Noticed {
  readonly event: 'notice';
  readonly text: string;
}

export interface GuardTripped {
  readonly event: 'guard-tripped';
  readonly guard: string;
  readonly text: string;
}

export interface StepEnded {
  readonly event: 'step-ended';
  readonly step: number;
  /** What later steps rest on; records made before a run could be resumed lack it. */
  readonly carried?: Carried;
}

/** What the steps up to here found out, as far as later steps rest on it. */
export interface Carried {
  /** The nameplate and what was measured, by the names that procedures refer to. */
  readonly known: Readonly<Record<string, number>>;
  /** The highest current that was held, and the lowest that was not. */
  readonly tried: { readonly held?: Amperes; readonly dropped?: Amperes };
  /** How each module's output stands to earth, by its name. */
  readonly earths: Readonly<Record<string, string>>;
}

export interface Ended {
  readonly event: 'ended';
  readonly how: 'completed' | 'stopped' | 'failed';
  readonly reason: string | null;
  /** The exit status that the reason stands for; 0 for a completed run, whatever it showed. */
  readonly status: number;
}

/** A reader believes none of these without its seal. */
export const mustBeSealed: ReadonlySet<JournalEvent['event']> = new Set([
  'opened',
  'resumed',
  'point-ended',
  'input',
  'guard-tripped',
  'ended',
]);

/**
 * These are sealed, and flushed to the disk before the run goes on. In records of old the end of a step bears no
 * seal.
 */
export const sealedEvents: ReadonlySet<JournalEvent['event']> = new Set([...mustBeSealed, 'step-ended']);

export type TimedEvent = JournalEvent & { readonly t: Seconds };
