/** A source below its limit: its voltage with no current, and everything in series with it up to the bus. */
export interface UnlimitedBranch {
  readonly voltage: number;
  /** Above 0. */
  readonly resistance: number;
}

/**
 * The current of each branch that feeds a common load, in volts, ohms and amperes, for those who ask some
 * thousand times and of no limits: `groupPoints` says the same, and more, at many times the cost. No current
 * flows backwards: a branch whose voltage is below the bus gives nothing. Millman's theorem over those that do,
 *
 *     V_bus = (Σ V_k/R_k − I) / Σ 1/R_k,   I_k = (V_k − V_bus)/R_k
 *
 * which are found by taking the branches in from the highest voltage downward while the bus stands below
 * the next one. Cost: one sort.
 * @param load in A, above 0.
 */
export function branchCurrents(branches: readonly UnlimitedBranch[], load: number): readonly number[] {
  const falling = [...branches].sort((one, other) => other.voltage - one.voltage);
  let bus = Number.NEGATIVE_INFINITY;
  let conductance = 0;
  let short = 0;
  for (const { voltage, resistance } of falling) {
    if (voltage <= bus) break;
    conductance += 1 / resistance;
    short += voltage / resistance;
    bus = (short - load) / conductance;
  }
  return branches.map(({ voltage, resistance }) => Math.max(0, (voltage - bus) / resistance));
}
