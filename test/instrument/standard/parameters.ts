import { StandardError } from './errors.js';
import type { Element } from './program-data.js';
import { factorOf, type UnitSymbol } from './suffix.js';
import { header, numbersIn } from './header.js';

/** Makes a value of a data element, or says by its number why it cannot. */
export type Parameter<Value> = (element: Element) => Value;

export interface Bounds {
  readonly least: number;
  readonly most: number;
  /** What DEFault stands for; the least when left out. */
  readonly default?: number;
}

/** A <numeric_value> of SCPI-99, 7.2: NRf with a unit or without, or MINimum, MAXimum, DEFault. */
export function numeric(unit: UnitSymbol, bounds: Bounds): Parameter<number> {
  return (element) => {
    if (element.kind === 'word') return bound(element.word, bounds);
    if (element.kind !== 'number') throw new StandardError(-104);
    return within(element.value * factorOf(element.suffix, unit), bounds);
  };
}

/** A number without a unit, rounded to a whole one as IEEE 488.2, 7.7.2.4 has it. */
export function whole(bounds: Bounds): Parameter<number> {
  return (element) => {
    if (element.kind === 'word') return bound(element.word, bounds);
    if (element.kind !== 'number') throw new StandardError(-104);
    if (element.suffix !== '') throw new StandardError(-138);
    return within(Math.round(element.value), bounds);
  };
}

/** ON, OFF, or a number that is rounded; what is not 0 is on (SCPI-99, 7.3). */
export const boolean: Parameter<boolean> = (element) => {
  if (element.kind === 'word') {
    const word = element.word.toUpperCase();
    if (word !== 'ON' && word !== 'OFF') throw new StandardError(-224);
    return word === 'ON';
  }
  if (element.kind !== 'number') throw new StandardError(-104);
  if (element.suffix !== '') throw new StandardError(-138);
  return Math.round(element.value) !== 0;
};

/** One of several words, each printed with its short form in capitals. */
export function oneOf<Printed extends string>(...printed: readonly Printed[]): Parameter<Printed> {
  return (element) => {
    if (element.kind !== 'word') throw new StandardError(-104);
    return meant(printed, [element.word]);
  };
}

/** A text that names a function by its header, as `"VOLTage:DC"` (SCPI-99, volume 2, SENSe:FUNCtion). */
export function functionName<Printed extends string>(...printed: readonly Printed[]): Parameter<Printed> {
  return (element) => {
    if (element.kind !== 'string') throw new StandardError(-104);
    return meant(printed, element.text.trim().split(':'));
  };
}

/** `(@101)`, `(@101,103)`, `(@101:104)` (SCPI-99, volume 1, 8.3.2), of those there are. */
export function channelList(there: readonly number[]): Parameter<readonly number[]> {
  return (element) => {
    if (element.kind !== 'expression') throw new StandardError(-104);
    const [, list] = /^\s*@\s*(.*?)\s*$/.exec(element.text) ?? [];
    if (list === undefined) throw new StandardError(-171);
    const named = list === '' ? [] : list.split(',').flatMap(rangeOf);
    if (named.some((channel) => !there.includes(channel))) throw new StandardError(-222);
    return named;
  };
}

function rangeOf(text: string): readonly number[] {
  const [, first, last = first] = /^\s*(\d+)\s*(?::\s*(\d+)\s*)?$/.exec(text) ?? [];
  if (first === undefined) throw new StandardError(-171);
  const [from, to] = [Number(first), Number(last)];
  const size = Math.abs(to - from) + 1;
  return Array.from({ length: size }, (_, index) => from + Math.sign(to - from) * index);
}

function bound(word: string, { least, most, default: usual = least }: Bounds): number {
  const values = { MINimum: least, MAXimum: most, DEFault: usual };
  return values[meant(['MINimum', 'MAXimum', 'DEFault'], [word])];
}

function meant<Printed extends string>(printed: readonly Printed[], words: readonly string[]): Printed {
  const found = printed.find((each) => numbersIn(header(each), words) !== undefined);
  if (found === undefined) throw new StandardError(-224);
  return found;
}

function within(value: number, { least, most }: Bounds): number {
  if (!(value >= least && value <= most)) throw new StandardError(-222);
  return value;
}
