import { asItCame, type Delivery } from './fault-line.js';
import { timeout } from './bench-files.js';
import type { Wire } from './wire.js';

/** What a fault can lay its hands on. */
export interface Hands {
  readonly load: Wire;
  readonly meter: Wire;
  /** The disk that holds the record, to the last byte. */
  readonly fillDisk: () => void;
  /** The wall clock of the program, by some hours. */
  readonly jumpClock: () => void;
}

/** What goes wrong from the moment on: once, or for good. */
type Fault = (hands: Hands) => void;

const noise = '\u00ff\u0007\u001b[2J~#@';

/** The faults of the matrix; what must come of each stands in `promises.ts`. */
export const faults = {
  /** The load's connection breaks and is there again. */
  dropped: ({ load }) => {
    load.drop();
  },
  /** The load's connection breaks for good. */
  gone: ({ load }) => {
    load.vanish();
  },
  /** The load's connection breaks, and another program has the port from then on. */
  stolen: ({ load }) => {
    load.steal();
  },
  /** The load does as it is told and never answers again. */
  silent: ({ load }) => {
    load.line.shape = () => swallowed;
  },
  /** One answer of the load comes when nobody waits for it any more. */
  late: ({ load }) => {
    load.line.shape = once(load.line, (reply) => ({
      pieces: [{ after: timeout * 1.3, text: `${reply}\n` }],
      answer: undefined,
    }));
  },
  /** One answer of the load never comes. */
  missing: ({ load }) => {
    load.line.shape = once(load.line, () => swallowed);
  },
  /** One answer of the load is noise. */
  garbled: ({ load }) => {
    load.line.shape = once(load.line, () => ({
      pieces: [{ after: 0, text: `${noise}\n` }],
      answer: undefined,
    }));
  },
  /** All that the load says is noise. */
  garbage: ({ load }) => {
    load.line.shape = () => ({ pieces: [{ after: 0, text: `${noise}\n` }], answer: undefined });
  },
  /** No fault: answers that arrive byte by byte, with a pause in the middle of a number. */
  split: ({ load, meter }) => {
    for (const { line } of [load, meter]) {
      line.shape = (reply) => ({
        pieces: Array.from(`${reply}\n`, (text) => ({ after: text === '.' ? 20 : 0, text })),
        answer: reply,
      });
    }
  },
  /** The load has an error in its queue that we did not make. */
  complaint: ({ load }) => {
    load.line.interject('GREENHOUSE:LIGHT ON');
  },
  /** The meter has no number any more. */
  'not-a-number': ({ meter }) => {
    meter.line.shape = instead('READ?', () => '+9.910000E+37');
  },
  /** The load's current is beyond its range. */
  overload: ({ load }) => {
    load.line.shape = instead('MEAS:CURR?', () => '+9.900000E+37');
  },
  /** The meter reads 75 V where the bench allows 60 V. */
  'over-voltage': ({ meter }) => {
    meter.line.shape = instead('READ?', () => '+7.500000E+01');
  },
  /** The load reads the current that it read last, whatever flows. */
  stuck: ({ load }) => {
    let last = load.line.latest.get('MEAS:CURR?');
    load.line.shape = instead('MEAS:CURR?', (reply) => (last ??= reply));
  },
  /** The meter's connection breaks and is there again. */
  'meter-dropped': ({ meter }) => {
    meter.drop();
  },
  /** The meter's connection breaks for good; the load is there. */
  'meter-gone': ({ meter }) => {
    meter.vanish();
  },
  /** No room for the record any more. */
  'disk-full': ({ fillDisk }) => {
    fillDisk();
  },
  /** No fault: the wall clock is set while the run goes on. */
  'clock-jump': ({ jumpClock }) => {
    jumpClock();
  },
} as const satisfies Record<string, Fault>;

export type FaultName = keyof typeof faults;

const swallowed: Delivery = { pieces: [], answer: undefined };

/** The next reply is treated so, those after it are left alone. */
function once(
  line: { shape: (reply: string, question: string) => Delivery },
  treat: (reply: string) => Delivery,
): (reply: string) => Delivery {
  return (reply) => {
    line.shape = asItCame;
    return treat(reply);
  };
}

/** All answers to one question are something else. */
function instead(
  asked: string,
  answer: (reply: string) => string,
): (reply: string, question: string) => Delivery {
  return (reply, question) => asItCame(question === asked ? answer(reply) : reply);
}
