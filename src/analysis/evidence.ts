import type {
  Answered,
  Ended,
  GuardTripped,
  Recovery,
  Resumed,
  TimedEvent,
} from '../record/journal-event.js';
import type { Seconds } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { PointCollector, type PointEvidence } from './point-evidence.js';

export type { PointEvidence } from './point-evidence.js';

/** What a journal amounts to: its points, each boiled down to a few numbers, however many readings it had. */
export interface Evidence {
  readonly header: RunHeader;
  readonly steps: readonly StepEvidence[];
  /** Undefined when the record was cut off. */
  readonly ended: Ended | undefined;
  readonly tripped: GuardTripped | undefined;
  readonly readings: number;
  /** From the beginning of this run to the last event of its journal. */
  readonly lasted: Seconds;
  /** The last that was heard of the load's input; undefined when nothing was. */
  readonly input: 'on' | 'off' | undefined;
  /** The runs that the first steps were taken over from, the first of them first. */
  readonly resumed: readonly Resumed[];
  /** How many steps, from the first, a run that goes on would take over. */
  readonly stepsDone: number;
}

export interface StepEvidence {
  readonly step: number;
  readonly kind: string;
  readonly settings: Readonly<Record<string, unknown>>;
  readonly points: readonly PointEvidence[];
  readonly recoveries: readonly Recovery[];
  readonly answers: readonly Answered[];
}

type Growing<T> = {
  -readonly [Key in keyof T]: T[Key] extends readonly (infer Item)[] ? Item[] : T[Key];
};

/** Takes the events of a journal one after the other; memory grows with the points, not with the readings. */
export class EvidenceCollector {
  readonly #header: RunHeader;
  readonly #steps: Growing<StepEvidence>[] = [];
  #point: PointCollector | undefined;
  #ended: Ended | undefined;
  #tripped: GuardTripped | undefined;
  #readings = 0;
  #lasted = 0;
  #input: 'on' | 'off' | undefined;
  readonly #resumed: Resumed[] = [];
  #stepsDone = 0;

  constructor(header: RunHeader) {
    this.#header = header;
  }

  add(event: TimedEvent): void {
    const step = this.#steps.at(-1);
    this.#lasted = event.t;
    switch (event.event) {
      case 'reading':
        this.#readings += 1;
        this.#point?.add(event);
        return;
      case 'step-began': {
        const settings = this.#header.steps[event.step - 1]?.settings ?? {};
        this.#steps.push({
          step: event.step,
          kind: event.kind,
          settings,
          points: [],
          recoveries: [],
          answers: [],
        });
        return;
      }
      case 'point-began':
        this.#point = new PointCollector(this.#header.bench, event, event.t);
        step?.points.push(this.#point.point);
        return;
      case 'point-ended':
        // Taken again; what was read before the connection was lost counts for nothing.
        if (event.outcome === 'interrupted') step?.points.pop();
        else if (this.#point) this.#point.point.outcome = event.outcome;
        this.#point = undefined;
        return;
      case 'recovery':
        step?.recoveries.push(event);
        return;
      case 'answer':
        step?.answers.push(event);
        return;
      case 'guard-tripped':
        this.#tripped ??= event;
        return;
      case 'input':
        this.#input = event.confirmed ? event.state : 'on';
        return;
      case 'ended':
        this.#ended = event;
        return;
      case 'resumed':
        this.#resumed.push(event);
        return;
      case 'step-ended':
        if (event.carried !== undefined && event.step === this.#stepsDone + 1) this.#stepsDone += 1;
        return;
      case 'opened':
      case 'instrument':
      case 'caution':
      case 'prompt':
      case 'notice':
        return;
    }
  }

  result(): Evidence {
    return {
      header: this.#header,
      steps: this.#steps,
      ended: this.#ended,
      tripped: this.#tripped,
      readings: this.#readings,
      lasted: this.#lasted,
      input: this.#input,
      resumed: this.#resumed,
      stepsDone: this.#stepsDone,
    };
  }
}
