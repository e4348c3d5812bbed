import { type HeaderPattern, headerPattern, matchesHeader } from './scpi-header.js';
import { type NumberRange, nr3, numberParameter } from './scpi-number.js';
import { ScpiErrorNumber } from './scpi-errors.js';

export type Outcome =
  | { readonly kind: 'done' }
  | { readonly kind: 'reply'; readonly text: string }
  | { readonly kind: 'error'; readonly number: number };

/** What an instrument can be told, or asked, under one header. */
export interface ScpiCommand {
  readonly header: HeaderPattern;
  readonly tell?: (parameters: readonly string[]) => Outcome;
  readonly ask?: (parameters: readonly string[]) => Outcome;
}

const done: Outcome = { kind: 'done' };
const reply = (text: string): Outcome => ({ kind: 'reply', text });
const error = (number: number): Outcome => ({ kind: 'error', number });

/** An order without a parameter. */
export function order(header: string, perform: () => void): ScpiCommand {
  return {
    header: headerPattern(header),
    tell: ([extra]) => {
      if (extra !== undefined) return error(ScpiErrorNumber.parameterNotAllowed);
      perform();
      return done;
    },
  };
}

/** A question; an instrument that measures takes and ignores up to `extras` of range and resolution. */
export function question(header: string, answer: () => string, extras = 0): ScpiCommand {
  return {
    header: headerPattern(header),
    ask: (parameters) =>
      parameters.length > extras ? error(ScpiErrorNumber.parameterNotAllowed) : reply(answer()),
  };
}

/** An order that takes and ignores up to two parameters: range and resolution, which here are automatic. */
export function configuration(header: string, perform: () => void): ScpiCommand {
  return {
    header: headerPattern(header),
    tell: (parameters) => {
      if (parameters.length > 2) return error(ScpiErrorNumber.parameterNotAllowed);
      perform();
      return done;
    },
  };
}

/** A number that is set, and asked for in NR3; `? MIN` and `? MAX` ask for its bounds. */
export function numberSetting(
  header: string,
  range: NumberRange,
  get: () => number,
  set: (value: number) => void,
): ScpiCommand {
  return {
    header: headerPattern(header),
    tell: one((text) => {
      const read = numberParameter(text, range);
      if ('error' in read) return error(read.error);
      set(read.value);
      return done;
    }),
    ask: ([bound, ...extra]) => {
      if (extra.length > 0) return error(ScpiErrorNumber.parameterNotAllowed);
      if (bound === undefined) return reply(nr3(get()));
      const read = numberParameter(bound, range);
      return 'error' in read ? error(read.error) : reply(nr3(read.value));
    },
  };
}

/** ON, OFF, or a number that is rounded: anything but 0 is on (SCPI-99, volume 1, 7.3). */
export function booleanSetting(
  header: string,
  get: () => boolean,
  set: (value: boolean) => void,
): ScpiCommand {
  return {
    header: headerPattern(header),
    tell: one((text) => {
      const word = text.toUpperCase();
      const on =
        word === 'ON'
          ? true
          : word === 'OFF'
            ? false
            : /^[+-]?\d+(\.\d*)?$/.test(word)
              ? Math.round(Number(word)) !== 0
              : undefined;
      if (on === undefined) return error(ScpiErrorNumber.illegalValue);
      set(on);
      return done;
    }),
    ask: ([extra]) =>
      extra === undefined ? reply(get() ? '1' : '0') : error(ScpiErrorNumber.parameterNotAllowed),
  };
}

/** One of several words, in short or long form; asked for, it answers in the short form. */
export function wordSetting<Meaning extends string>(
  header: string,
  words: ReadonlyMap<string, Meaning>,
  get: () => Meaning,
  set: (value: Meaning) => void,
): ScpiCommand {
  const patterns = [...words].map(([printed, meaning]) => ({ pattern: headerPattern(printed), meaning }));
  return {
    header: headerPattern(header),
    tell: one((text) => {
      const found = patterns.find(({ pattern }) => matchesHeader(pattern, [text]));
      if (found === undefined) return error(ScpiErrorNumber.illegalValue);
      set(found.meaning);
      return done;
    }),
    ask: ([extra]) => {
      if (extra !== undefined) return error(ScpiErrorNumber.parameterNotAllowed);
      return reply(patterns.find(({ meaning }) => meaning === get())?.pattern.nodes[0]?.short ?? '');
    },
  };
}

function one(tell: (text: string) => Outcome): (parameters: readonly string[]) => Outcome {
  return ([text, ...extra]) => {
    if (text === undefined) return error(ScpiErrorNumber.missingParameter);
    return extra.length > 0 ? error(ScpiErrorNumber.parameterNotAllowed) : tell(text);
  };
}
