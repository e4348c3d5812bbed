/** What a module does past its limit, as far as a group that it feeds notices. */
export type PastLimit =
  /** Holds its current, or lets it grow while its voltage gives way: `beyond` is that slope in Ω, endless for none. */
  | 'holds'
  /** A straight line back to the current `beyond` at 0 V. */
  | 'folds'
  /** Voltage times current stay as they were at the limit. */
  | 'keeps-power'
  /** Pulses, or switches itself off: the others have to carry everything. */
  | 'leaves';

/** One branch of a group over many draws, a value for each: its module and the ballast behind it. V, Ω, A. */
export interface DrawnBranch {
  readonly voltage: Float64Array;
  readonly droop: Float64Array;
  readonly ballast: Float64Array;
  readonly limit: Float64Array;
  readonly past: PastLimit;
  /** What `past` needs to know. */
  readonly beyond: Float64Array;
  /** Up to which the module may be used where that is below its limit, else endless. */
  readonly ceiling: Float64Array;
}
