import type { Dimension } from './quantity.js';

interface Prefix {
  /** The first spelling is the one we write. */
  readonly spellings: readonly string[];
  readonly shift: number;
}

/** A unit as files may write it; the first spelling is the one we write. */
interface Unit {
  readonly spellings: readonly string[];
  readonly prefixes: readonly Prefix[];
  /** How many units of the dimension one of this is: `factor` times ten to the power of `shift`. */
  readonly factor: number;
  readonly shift: number;
}

// U+00B5 is the micro sign of Latin-1, U+03BC the Greek letter that keyboards and Unicode prefer.
const micro: Prefix = { spellings: ['\u00b5', '\u03bc', 'u'], shift: -6 };
const milli: Prefix = { spellings: ['m'], shift: -3 };
const kilo: Prefix = { spellings: ['k'], shift: 3 };
// Mega is for ohms alone: nothing else here is ever so large, and `4 MA` is `4 mA` mistyped.
const mega: Prefix = { spellings: ['M'], shift: 6 };

const plain = { factor: 1, shift: 0 } as const;

/**
 * The units of this field, by what they measure. A prefix and a unit are written together, exactly as
 * here, capitals and all; whatever is not in this table is refused.
 */
export const units = {
  voltage: [{ spellings: ['V'], prefixes: [micro, milli, kilo], ...plain }],
  current: [{ spellings: ['A'], prefixes: [micro, milli], ...plain }],
  // U+03A9 is the Greek letter, U+2126 the ohm sign, which looks the same.
  resistance: [
    { spellings: ['\u03a9', '\u2126', 'ohm', 'Ohm'], prefixes: [micro, milli, kilo, mega], ...plain },
  ],
  power: [{ spellings: ['W'], prefixes: [micro, milli, kilo], ...plain }],
  time: [
    { spellings: ['s'], prefixes: [micro, milli], ...plain },
    { spellings: ['min'], prefixes: [], factor: 60, shift: 0 },
    { spellings: ['h'], prefixes: [], factor: 3600, shift: 0 },
  ],
  temperature: [{ spellings: ['°C', 'degC'], prefixes: [], ...plain }],
  'temperature-difference': [{ spellings: ['K'], prefixes: [], ...plain }],
  ratio: [{ spellings: ['%'], prefixes: [], factor: 1, shift: -2 }],
  'voltage-rate': [{ spellings: ['V/h'], prefixes: [micro, milli], ...plain }],
} as const satisfies Record<Dimension, readonly Unit[]>;

/** A unit with its prefix, as one symbol. */
export interface Scale {
  readonly symbol: string;
  readonly factor: number;
  readonly shift: number;
}

/** The scales in which we write a dimension, smallest first. */
export function scalesOf(dimension: Dimension): readonly Scale[] {
  return written[dimension];
}

/** What a symbol means, or undefined when it is not in the table. */
export function readUnit(symbol: string): (Scale & { readonly dimension: Dimension }) | undefined {
  return readable.get(symbol);
}

/** Every spelling that a file may use for the dimension. */
export function spellingsOf(dimension: Dimension): readonly string[] {
  return [...readable.values()].filter((unit) => unit.dimension === dimension).map((unit) => unit.symbol);
}

/** For messages: `µΩ, mΩ, Ω (or ohm, Ohm), kΩ, MΩ`. */
export function allowedUnits(dimension: Dimension): string {
  const otherSpellings = (symbol: string): string => {
    const unit: Unit | undefined = units[dimension].find((each: Unit) => each.spellings[0] === symbol);
    const typed = unit?.spellings.slice(1).filter((spelling) => spelling !== '\u2126') ?? [];
    return typed.length === 0 ? symbol : `${symbol} (or ${typed.join(', ')})`;
  };
  return written[dimension].map((scale) => otherSpellings(scale.symbol)).join(', ');
}

const noPrefix: Prefix = { spellings: [''], shift: 0 };

function scales(unit: Unit): (Scale & { readonly preferred: boolean })[] {
  return [noPrefix, ...unit.prefixes].flatMap((prefix) =>
    prefix.spellings.flatMap((before, prefixRank) =>
      unit.spellings.map((name, nameRank) => ({
        symbol: before + name,
        factor: unit.factor,
        shift: unit.shift + prefix.shift,
        preferred: prefixRank === 0 && nameRank === 0,
      })),
    ),
  );
}

const dimensionNames = Object.keys(units) as Dimension[];

const readable = new Map(
  dimensionNames.flatMap((dimension) =>
    units[dimension]
      .flatMap((unit: Unit) => scales(unit))
      .map(({ symbol, factor, shift }) => [symbol, { symbol, factor, shift, dimension }] as const),
  ),
);

const size = (scale: Scale): number => scale.factor * 10 ** scale.shift;

const written = Object.fromEntries(
  dimensionNames.map((dimension) => [
    dimension,
    units[dimension]
      .flatMap((unit: Unit) => scales(unit))
      .filter((scale) => scale.preferred)
      .map(({ symbol, factor, shift }): Scale => ({ symbol, factor, shift }))
      .sort((one, other) => size(one) - size(other)),
  ]),
) as unknown as Readonly<Record<Dimension, readonly Scale[]>>;
