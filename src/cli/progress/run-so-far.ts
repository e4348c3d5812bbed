import type { Clock } from '../../clock/clock.js';
import type { Seconds } from '../../quantity/quantity.js';
import type { JournalEvent } from '../../record/journal-event.js';
import type { Plan } from '../../run/plan.js';
import { timeLeft } from '../../run/time-left.js';
import type { Progress } from '../../steps/step-kind.js';

export interface StepSoFar {
  /** Counted from 1. */
  readonly number: number;
  readonly kind: string;
  readonly summary: string;
  readonly state: 'taken-over' | 'done' | 'now' | 'to-come';
  /** Undefined where it is not over, or was done in another run. */
  readonly took: Seconds | undefined;
  readonly points: PointsSoFar;
}

/** How many points of a step ended in which way; what was interrupted is taken again. */
export interface PointsSoFar {
  readonly held: number;
  readonly dropped: number;
  readonly measured: number;
}

type Growing<T> = { -readonly [Key in keyof T]: T[Key] };

const none: PointsSoFar = { held: 0, dropped: 0, measured: 0 };

/** What someone who watches knows of a run: where it is, what came of the steps, what is read, and the time. */
export class RunSoFar {
  readonly plan: Plan;
  readonly #clock: Clock;
  readonly #began: Seconds;
  readonly #steps: Growing<StepSoFar>[];
  #step = 0;
  #stepBegan: Seconds;
  #read: Omit<Progress, 'note'> = {};
  #note: string | undefined;

  /** @param done how many steps, from the first, were done in the run that this one goes on with. */
  constructor(plan: Plan, clock: Clock, done: number) {
    this.plan = plan;
    this.#clock = clock;
    this.#began = clock.now();
    this.#stepBegan = this.#began;
    this.#step = done;
    this.#steps = plan.steps.map(({ kind, summary }, index) => ({
      number: index + 1,
      kind: kind.kind,
      summary,
      state: index < done ? 'taken-over' : 'to-come',
      took: undefined,
      points: none,
    }));
  }

  get steps(): readonly StepSoFar[] {
    return this.#steps;
  }

  /** The one under way, or the last that was; undefined before the first. */
  get now(): StepSoFar | undefined {
    return this.#steps[this.#step - 1];
  }

  get elapsed(): Seconds {
    return this.#clock.now() - this.#began;
  }

  get left(): Seconds {
    const isOver = this.now?.state !== 'now';
    return timeLeft(this.plan.steps, this.#step, isOver ? Infinity : this.#clock.now() - this.#stepBegan);
  }

  stepBegan(number: number): void {
    this.#step = number;
    this.#stepBegan = this.#clock.now();
    this.#read = {};
    this.#note = undefined;
    const step = this.#steps[number - 1];
    if (step !== undefined) step.state = 'now';
  }

  get figures(): Progress {
    return this.#note === undefined ? this.#read : { ...this.#read, note: this.#note };
  }

  /** What was read last stays until something else was; a voltage that comes alone has no current beside it. */
  seen({ note, ...read }: Progress): void {
    this.#note = note ?? this.#note;
    this.#read = read.voltage === undefined ? { ...this.#read, ...read } : read;
  }

  recorded(event: JournalEvent): void {
    const step = this.#steps[this.#step - 1];
    if (step?.state !== 'now') return;
    if (event.event === 'point-ended' && event.outcome !== 'interrupted') {
      step.points = { ...step.points, [event.outcome]: step.points[event.outcome] + 1 };
    }
    if (event.event !== 'step-ended') return;
    step.state = 'done';
    step.took = this.#clock.now() - this.#stepBegan;
  }
}

/** `21 points held`, `14 points held, 6 not`, `3 points`; empty where a step takes none. */
export function pointsInWords({ held, dropped, measured }: PointsSoFar): string {
  const points = (count: number): string => `${count} ${count === 1 ? 'point' : 'points'}`;
  if (held + dropped === 0) return measured === 0 ? '' : points(measured);
  if (dropped === 0) return `${points(held)} held`;
  return held === 0 ? `${points(dropped)} not held` : `${points(held)} held, ${dropped} not`;
}
