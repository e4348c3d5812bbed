/** How far a figure may go, both ends allowed; `none` where it is only told, beside one that has a goal. */
export type Bound = { readonly atMost: number } | { readonly atLeast: number } | 'none';

/** What was measured, in the unit that is read most easily. */
export interface Amount {
  readonly value: number;
  /** UCUM where it has one, else the word for what was counted, as in "points". */
  readonly unit: string;
}

/** One figure of the table: ours beside what it is held against, both measured in this run. */
export type Figure = Measured | Skipped;

export interface Measured {
  readonly kind: 'measured';
  /** Kebab-case, as in "analysing-a-million-readings". */
  readonly name: string;
  /** What was timed or counted, in a few words. */
  readonly what: string;
  readonly ours: Amount;
  /** What it is held against, and how much that took; in the same unit. */
  readonly rival: Amount & { readonly what: string };
  /** What the bound is for: mostly ours over the rival's. */
  readonly ratio: number;
  readonly bound: Bound;
  /** What else was seen on the way and helps to read it, as in `{ readings: 1_000_000 }`. */
  readonly beside?: Readonly<Record<string, number | string>>;
}

export interface Skipped {
  readonly kind: 'skipped';
  readonly name: string;
  readonly what: string;
  readonly why: string;
}

/** One file of `benchmarks`, its default export: measures as often and as long as it takes to be sure. */
export type Benchmark = () => Promise<Figure[]>;

/** Also true of what has no goal. */
export function reached({ ratio, bound }: Measured): boolean {
  if (bound === 'none') return true;
  return 'atMost' in bound ? ratio <= bound.atMost : ratio >= bound.atLeast;
}
