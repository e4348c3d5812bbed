import { StandardError } from './errors.js';
import { type Header, header } from './header.js';
import type { Parameter } from './parameters.js';
import type { Element } from './program-data.js';
import type { Response } from './response.js';

/** When something is told, and the numbers of those nodes of its header that have one. */
export interface Occasion {
  readonly at: number;
  readonly numbers: readonly number[];
}

/** What is answered, and how long the answer takes. */
export interface Answer {
  readonly response: Response;
  readonly takes?: number;
}

/** What comes after an order is done: it goes on while other things are heard, or nothing is heard meanwhile. */
export interface Aftermath {
  readonly goesOn?: number;
  readonly waits?: number;
}

/** One line of a command tree: what its header does when it is told, and when it is asked. */
export interface Command {
  readonly header: Header;
  readonly tell?: (data: readonly Element[], occasion: Occasion) => Aftermath;
  readonly ask?: (data: readonly Element[], occasion: Occasion) => Answer;
}

/** Told without data. */
export function event(printed: string, act: (occasion: Occasion) => Aftermath | undefined): Command {
  return {
    header: header(printed),
    tell: (data, occasion) => {
      none(data);
      return act(occasion) ?? {};
    },
  };
}

/** Told with one datum. */
export function order<Value>(
  printed: string,
  parameter: Parameter<Value>,
  act: (value: Value, occasion: Occasion) => void,
): Command {
  return {
    header: header(printed),
    tell: (data, occasion) => {
      act(parameter(only(data)), occasion);
      return {};
    },
  };
}

/** Asked without data. */
export function query(printed: string, answer: (occasion: Occasion) => Response | Answer): Command {
  return {
    header: header(printed),
    ask: (data, occasion) => {
      none(data);
      return answerOf(answer(occasion));
    },
  };
}

/** Told with one datum, asked what it is. Numbers are asked for their bounds too: `CURR? MAX`. */
export function setting<Value>(
  printed: string,
  parameter: Parameter<Value>,
  kept: {
    readonly set: (value: Value, occasion: Occasion) => void;
    readonly get: (occasion: Occasion) => Value;
  },
  respond: (value: Value) => Response,
): Command {
  return {
    ...order(printed, parameter, kept.set),
    ask: (data, occasion) => {
      if (data.length > 1) throw new StandardError(-108);
      const [bound] = data;
      if (bound === undefined) return { response: respond(kept.get(occasion)) };
      // A bound is asked for by its name; what else the parameter takes is no question.
      if (bound.kind !== 'word') throw new StandardError(-108);
      return { response: respond(parameter(bound)) };
    },
  };
}

/** Told or asked with up to so many data that are optional, as the range and the resolution of MEASure?. */
export function withOptional(command: Command, parameters: readonly Parameter<unknown>[]): Command {
  const check = (data: readonly Element[]): void => {
    if (data.length > parameters.length) throw new StandardError(-108);
    for (const [index, element] of data.entries()) parameters[index]?.(element);
  };
  const { tell, ask } = command;
  return {
    header: command.header,
    ...(tell && {
      tell: (data: readonly Element[], occasion: Occasion): Aftermath => {
        check(data);
        return tell([], occasion);
      },
    }),
    ...(ask && {
      ask: (data: readonly Element[], occasion: Occasion): Answer => {
        check(data);
        return ask([], occasion);
      },
    }),
  };
}

function none(data: readonly Element[]): void {
  if (data.length > 0) throw new StandardError(-108);
}

function only([first, ...others]: readonly Element[]): Element {
  if (first === undefined) throw new StandardError(-109);
  if (others.length > 0) throw new StandardError(-108);
  return first;
}

function answerOf(given: Response | Answer): Answer {
  return 'response' in given ? given : { response: given };
}
