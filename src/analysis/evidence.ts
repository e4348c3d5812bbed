import type {
  Answered,
  CautionAcknowledged,
  Ended,
  GuardTripped,
  Recovery,
  Resumed,
  TimedEvent,
} from '../record/journal-event.js';
import type { Seconds } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { type Happening, HappeningCollector, type Happenings } from './happenings.js';
import { KeptPoints } from './kept-points.js';
import { PointCollector, type PointEvidence } from './point-evidence.js';
import { answerInWords, inputInWords, recoveryInWords } from './told-happening.js';

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
  /** As far as there can be any: a journal that repeats them by the thousand has the first of them here. */
  readonly cautions: readonly CautionAcknowledged[];
  /** What else happened on the way. */
  readonly happenings: Happenings;
}

export interface StepEvidence {
  readonly step: number;
  readonly kind: string;
  readonly began: Seconds;
  /** Undefined when it was broken off. */
  readonly ended: Seconds | undefined;
  /** Also of points that were taken again. */
  readonly readings: number;
  /** Where in the journal it stands, by lines that count from 1. */
  readonly lines: { readonly first: number; readonly last: number };
  readonly settings: Readonly<Record<string, unknown>>;
  /** In the order in which they were taken; where they were many looks at the same, neighbours as one. */
  readonly points: readonly PointEvidence[];
  readonly recoveries: readonly Recovery[];
  readonly answers: readonly Answered[];
}

type Growing<T> = {
  -readonly [Key in keyof T]: T[Key] extends readonly (infer Item)[]
    ? Item[]
    : T[Key] extends { readonly first: number; readonly last: number }
      ? { first: number; last: number }
      : T[Key];
};

interface GrowingStep extends Growing<Omit<StepEvidence, 'points'>> {
  readonly points: KeptPoints;
}

/** There are half a dozen names; this is room for those of other versions. */
const mostCautions = 50;

/**
 * Takes the events of a journal one after the other; memory grows with the points, not with the readings, and of
 * those that look at the same again and again not with them either.
 */
export class EvidenceCollector {
  readonly #header: RunHeader;
  readonly #steps: GrowingStep[] = [];
  /** The point under way, and where it is kept once it has ended; nowhere outside of a step. */
  #point: { readonly collector: PointCollector; readonly into: KeptPoints | undefined } | undefined;
  #ended: Ended | undefined;
  #tripped: GuardTripped | undefined;
  #readings = 0;
  #lines = 0;
  #lasted = 0;
  #input: 'on' | 'off' | undefined;
  readonly #resumed: Resumed[] = [];
  #stepsDone = 0;
  readonly #cautions: CautionAcknowledged[] = [];
  readonly #happenings = new HappeningCollector();

  constructor(header: RunHeader) {
    this.#header = header;
  }

  add(event: TimedEvent): void {
    const step = this.#steps.at(-1);
    this.#lasted = event.t;
    this.#lines += 1;
    if (step?.ended === undefined && event.event !== 'ended' && step) step.lines.last = this.#lines;
    switch (event.event) {
      case 'reading':
        this.#readings += 1;
        if (step) step.readings += 1;
        this.#point?.collector.add(event);
        return;
      case 'step-began': {
        const settings = this.#header.steps[event.step - 1]?.settings ?? {};
        this.#steps.push({
          step: event.step,
          kind: event.kind,
          began: event.t,
          ended: undefined,
          readings: 0,
          lines: { first: this.#lines, last: this.#lines },
          settings,
          points: new KeptPoints(),
          recoveries: [],
          answers: [],
        });
        return;
      }
      case 'point-began':
        this.#keepPoint();
        this.#point = {
          collector: new PointCollector(this.#header.bench, event, event.t),
          into: step?.points,
        };
        return;
      case 'point-ended':
        // Taken again; what was read before the connection was lost counts for nothing.
        if (event.outcome === 'interrupted') {
          this.#tell('taken-again', 'a point was broken off by a lost connection and taken again', event);
        } else if (this.#point) {
          this.#point.collector.point.outcome = event.outcome;
          this.#keepPoint();
        }
        this.#point = undefined;
        return;
      case 'recovery':
        step?.recoveries.push(event);
        this.#tell('recovery', recoveryInWords(event), event);
        return;
      case 'answer':
        step?.answers.push(event);
        this.#tell('answered', answerInWords(event), event);
        return;
      case 'guard-tripped':
        this.#tripped ??= event;
        this.#tell('guard', `${event.guard}: ${event.text}`, event);
        return;
      case 'input':
        this.#input = event.confirmed ? event.state : 'on';
        this.#tell('input', inputInWords(event), event);
        return;
      case 'ended':
        this.#ended = event;
        return;
      case 'resumed':
        this.#resumed.push(event);
        return;
      case 'step-ended':
        if (step) step.ended = event.t;
        if (event.carried !== undefined && event.step === this.#stepsDone + 1) this.#stepsDone += 1;
        return;
      case 'caution':
        if (this.#cautions.length < mostCautions) this.#cautions.push(event);
        return;
      case 'prompt':
        this.#tell('asked', event.text, event);
        return;
      case 'notice':
        this.#tell('notice', event.text, event);
        return;
      case 'opened':
      case 'instrument':
        return;
    }
  }

  result(): Evidence {
    return {
      header: this.#header,
      steps: this.#steps.map((step) => ({ ...step, points: this.#pointsOf(step) })),
      ended: this.#ended,
      tripped: this.#tripped,
      readings: this.#readings,
      lasted: this.#lasted,
      input: this.#input,
      resumed: this.#resumed,
      stepsDone: this.#stepsDone,
      cautions: this.#cautions,
      happenings: this.#happenings.result(),
    };
  }

  #keepPoint(): void {
    if (this.#point !== undefined) this.#point.into?.add(this.#point.collector.point);
  }

  #pointsOf({ points }: GrowingStep): readonly PointEvidence[] {
    const open = this.#point;
    return open?.into === points ? [...points.all(), open.collector.point] : points.all();
  }

  #tell(kind: Happening['kind'], text: string, { t }: Pick<TimedEvent, 't'>): void {
    this.#happenings.add(kind, text, this.#steps.at(-1)?.step, t);
  }
}
