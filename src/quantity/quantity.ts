/**
 * What a number measures. Inside the program every quantity is a plain number in the unit of its
 * dimension below; text with units exists only at the borders (files, screen).
 */
export const dimensions = {
  voltage: 'V',
  current: 'A',
  resistance: 'Ohm',
  power: 'W',
  time: 's',
  temperature: 'Cel',
  'temperature-difference': 'K',
  /** A plain ratio; 5 % is 0.05. In JSON it is written in %. */
  ratio: '%',
  /** A drift. */
  'voltage-rate': 'V/h',
} as const;

export type Dimension = keyof typeof dimensions;

export type Volts = number;
export type Amperes = number;
export type Ohms = number;
export type Watts = number;
export type Seconds = number;
/** Degrees Celsius. */
export type Celsius = number;
/** A difference of temperatures. */
export type Kelvins = number;
/** 1 means 100 %. */
export type Ratio = number;

/** A quantity as a file may write it: `4 A`, or `140 % of rated-current` to be worked out later. */
export type QuantityOrShare =
  | { readonly kind: 'absolute'; readonly value: number }
  | { readonly kind: 'share'; readonly ratio: Ratio; readonly of: ReferenceName };

/** What a share may refer to: the nameplate, or what an earlier step has measured. */
export const references = {
  'rated-voltage': 'voltage',
  'rated-current': 'current',
  'open-circuit-voltage': 'voltage',
  'dropout-current': 'current',
} as const satisfies Record<string, Dimension>;

export type ReferenceName = keyof typeof references;

/** The same finding in the record of an earlier run; only what is decided afterwards may refer to it. */
export const baseline = 'baseline';

/** A quantity as a criterion may write it: `20 mΩ`, `100 % of rated-current`, `120 % of baseline`. */
export type QuantityOrAnyShare =
  QuantityOrShare | { readonly kind: 'share'; readonly ratio: Ratio; readonly of: typeof baseline };
