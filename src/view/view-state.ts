import type { Dimension, Seconds } from '../quantity/quantity.js';
import type { Acknowledgement, Phase, PointOutcome, Interrupted, SetPoint } from '../record/journal-event.js';

/**
 * What a live view shows, and how each message changes it. The server and the page hold the same state by the
 * same rule, so that a page that comes late, or again, sees what every other sees. Values are in V, A, °C and s;
 * times are seconds since the run began. Nothing here grows with the length of the run beyond the bounds below.
 */
export interface ViewState {
  readonly run: ViewedRun;
  /** Counted from 1; 0 before the first. */
  readonly step: number;
  readonly elapsed: Seconds;
  readonly remaining: Seconds;
  readonly figures: Figures;
  /** The load's input by what was last read back; undefined while nothing was. */
  readonly input: 'on' | 'off' | undefined;
  readonly points: readonly ViewedPoint[];
  readonly cautions: readonly ViewedCaution[];
  /** What the person is asked now. */
  readonly question: Question | undefined;
  readonly notices: readonly ViewedNotice[];
  /** A wish to stop was heard. */
  readonly stopping: boolean;
  /** From when the bench was left until it is told what the run came to. */
  readonly workingOut: ViewedLeft | undefined;
  readonly ended: ViewedEnd | undefined;
}

export interface ViewedRun {
  readonly title: string;
  readonly procedure: string;
  /** `K1`, or `K1+K2`. */
  readonly module: string;
  readonly rated: { readonly voltage: number; readonly current: number };
  readonly bench: string;
  readonly simulated: boolean;
  /** ISO 8601, UTC. */
  readonly began: string;
  /** How many steps, from the first, were done in the run that this one goes on with; none when left out. */
  readonly done?: number;
  readonly steps: readonly {
    readonly kind: string;
    readonly summary: string;
    readonly duration: Seconds;
  }[];
}

export interface Figures {
  readonly setCurrent?: number;
  /** Not a number where the instrument had none: null, as JSON knows no other. */
  readonly voltage?: number | null;
  readonly current?: number | null;
  readonly temperature?: number | null;
  readonly note?: string;
}

/** One point, its readings averaged. */
export interface ViewedPoint {
  readonly step: number;
  readonly phase: Phase;
  readonly set: SetPoint;
  readonly t: Seconds;
  readonly voltage: number | null;
  readonly current: number | null;
  readonly temperature: number | null;
  readonly outcome: PointOutcome | Interrupted;
}

export interface ViewedCaution {
  readonly name: string;
  readonly text: string;
  /** Undefined while it waits. */
  readonly by: Acknowledgement | undefined;
}

export interface Question {
  /** Another number for each; an answer names the question that it is to. */
  readonly id: number;
  readonly heading: string;
  readonly text: string;
  /** `yes`: a caution or the wiring, to be acknowledged; `done`: an act; else what is to be typed. */
  readonly answer: 'yes' | 'done' | 'text' | Dimension;
}

export interface ViewedNotice {
  readonly t: Seconds;
  readonly text: string;
}

/** How a run ended and left the bench, which is known before it is worked out what its record shows. */
export interface ViewedLeft {
  readonly how: 'completed' | 'stopped' | 'failed';
  readonly reason: string | null;
  /** Whether load and source are off, in words; and what to do by hand where that could not be confirmed. */
  readonly safety: readonly {
    readonly what: 'load' | 'source';
    readonly confirmed: boolean;
    readonly text: string;
  }[];
  /** The record's folder; empty where none was begun. */
  readonly record: string;
}

export interface ViewedEnd extends ViewedLeft {
  /** What it came to, the answer first; empty where nothing could be told. */
  readonly answer: readonly string[];
  readonly outcome: 'conforms' | 'does-not-conform' | 'undecided' | 'not-judged';
  /** The file of the report; null where it was not written. */
  readonly report: string | null;
}

/** One change; what the stream of events carries, each as one JSON object. */
export type ViewMessage =
  /** First on every connection. */
  | { readonly kind: 'everything'; readonly state: ViewState }
  | { readonly kind: 'step'; readonly step: number; readonly elapsed: Seconds; readonly remaining: Seconds }
  | {
      readonly kind: 'figures';
      readonly figures: Figures;
      readonly elapsed: Seconds;
      readonly remaining: Seconds;
    }
  | { readonly kind: 'input'; readonly input: 'on' | 'off' }
  | { readonly kind: 'point'; readonly point: ViewedPoint }
  | { readonly kind: 'caution'; readonly caution: ViewedCaution }
  /** Without one: it was answered, here or elsewhere. */
  | { readonly kind: 'question'; readonly question?: Question }
  | { readonly kind: 'notice'; readonly notice: ViewedNotice }
  | { readonly kind: 'stopping' }
  /** The bench is left, and the runner will be silent for as long as the record keeps it busy. */
  | { readonly kind: 'working-out'; readonly left: ViewedLeft }
  | { readonly kind: 'ended'; readonly ended: ViewedEnd }
  /** Every second, so that silence means that the runner is lost; with the times where they went on. */
  | { readonly kind: 'beat'; readonly elapsed?: Seconds; readonly remaining?: Seconds };

export const mostPoints = 600;
export const mostNotices = 60;

export function applied(state: ViewState, message: ViewMessage): ViewState {
  switch (message.kind) {
    case 'everything':
      return message.state;
    case 'step': {
      const { step, elapsed, remaining } = message;
      return { ...state, step, elapsed, remaining, figures: {} };
    }
    case 'figures': {
      const { figures, elapsed, remaining } = message;
      return { ...state, figures, elapsed, remaining };
    }
    case 'input':
      return { ...state, input: message.input };
    case 'point':
      return { ...state, points: bounded([...state.points, message.point]) };
    case 'caution': {
      const { cautions } = state;
      const { caution } = message;
      const at = cautions.findIndex(({ name }) => name === caution.name);
      return { ...state, cautions: at < 0 ? [...cautions, caution] : cautions.with(at, caution) };
    }
    case 'question':
      return { ...state, question: message.question };
    case 'notice':
      return { ...state, notices: [...state.notices, message.notice].slice(-mostNotices) };
    case 'stopping':
      return { ...state, stopping: true };
    case 'working-out':
      return { ...state, workingOut: message.left, question: undefined };
    case 'ended':
      return { ...state, ended: message.ended, workingOut: undefined, question: undefined };
    case 'beat': {
      const { elapsed = state.elapsed, remaining = state.remaining } = message;
      return { ...state, elapsed, remaining };
    }
  }
}

/** How the run ended and left the bench; undefined while it goes on. */
export function leftBy({
  workingOut,
  ended,
}: Pick<ViewState, 'workingOut' | 'ended'>): ViewedLeft | undefined {
  return ended ?? workingOut;
}

/**
 * Of more than can be told apart on a screen every other of the older half is left out; what did not hold stays, as
 * long as that makes room.
 */
function bounded(points: readonly ViewedPoint[]): readonly ViewedPoint[] {
  if (points.length <= mostPoints) return points;
  const half = points.length / 2;
  const thinned = (stays: (point: ViewedPoint) => boolean): readonly ViewedPoint[] =>
    points.filter((point, index) => index >= half || index % 2 === 0 || stays(point));
  const sparse = thinned(({ outcome }) => outcome === 'dropped');
  return sparse.length <= mostPoints ? sparse : thinned(() => false);
}
