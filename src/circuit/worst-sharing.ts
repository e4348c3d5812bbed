import { imbalanceOf } from './imbalance.js';
import { type UnlimitedBranch, branchCurrents } from './shared-load.js';

/** A value and its expanded uncertainty: it lies within value ± expanded. */
export interface Uncertain {
  readonly value: number;
  readonly expanded: number;
}

/** What is known of one module of a group, in V and Ω. */
export interface GroupModule {
  readonly openCircuit: Uncertain;
  readonly droop: Uncertain;
}

/** A group in which every module has a ballast of the same nominal value. */
export interface BallastedGroup {
  readonly modules: readonly GroupModule[];
  /** Of the whole group, in A. */
  readonly load: number;
  /** Nominal, in Ω. */
  readonly ballast: number;
  /** Of the ballast: 0.05 for ± 5 %. */
  readonly tolerance: number;
}

/** The case in which a group shares worst. */
export interface WorstSharing {
  /** (I_max − I_min)/I_mean; endless where two stiff branches meet without any resistance. */
  readonly imbalance: number;
  /** Of the module that carries most there, in A. */
  readonly mostCurrent: number;
}

/** What a branch may be, between its two ends. */
interface Range {
  readonly voltage: readonly [low: number, high: number];
  readonly resistance: readonly [low: number, high: number];
}

/** Each branch's range: droop and ballast in series, no droop below 0. */
export function rangesOf({ modules, ballast, tolerance }: BallastedGroup): readonly Range[] {
  return modules.map(({ openCircuit, droop }) => ({
    voltage: [openCircuit.value - openCircuit.expanded, openCircuit.value + openCircuit.expanded],
    resistance: [
      Math.max(0, droop.value - droop.expanded) + ballast * (1 - tolerance),
      droop.value + droop.expanded + ballast * (1 + tolerance),
    ],
  }));
}

/**
 * The worst sharing that voltages, droops and ballasts within their ranges can give, all independent.
 *
 * Of the difference I_i − I_j of two modules the worst corner is known without a search. No current flows
 * backwards, so the bus rises with every voltage and falls with every resistance. Hence the difference
 * grows with V_i and falls with R_i, falls with V_j and grows with R_j. The others act through the bus
 * alone: where branch i is the stiffer of the two (R_i ≤ R_j) a lower bus is worse, so they stand at their
 * lowest voltages and highest resistances; where j is, a higher bus is, and they stand the other way round.
 * So there is one corner for each ordered pair. This is exact while every module carries something. Where
 * one can idle, the imbalance is N/(N − 1) at least, and the answer says no less than that.
 *
 * Checked against all corners by brute force in test/circuit/worst-sharing.test.ts. Cost: the cube of the
 * number of modules.
 * @param group at least two modules, a load above 0, the tolerance from 0 to below 1.
 */
export function worstSharing(group: BallastedGroup): WorstSharing {
  const ranges = rangesOf(group);
  if (ranges.some(({ resistance }) => resistance[0] <= 0)) {
    return { imbalance: Number.POSITIVE_INFINITY, mostCurrent: group.load };
  }
  let worst: WorstSharing = { imbalance: 0, mostCurrent: group.load / ranges.length };
  for (const most of ranges.keys()) {
    for (const least of ranges.keys()) {
      if (most === least) continue;
      const currents = branchCurrents(worstCorner(ranges, most, least), group.load);
      const imbalance = imbalanceOf(currents);
      if (imbalance > worst.imbalance) worst = { imbalance, mostCurrent: Math.max(...currents) };
    }
  }
  return worst;
}

/** In which `most` takes as much more than `least` as it can. */
function worstCorner(ranges: readonly Range[], most: number, least: number): readonly UnlimitedBranch[] {
  const lowBus = (ranges[most]?.resistance[0] ?? 0) <= (ranges[least]?.resistance[1] ?? 0);
  return ranges.map((range, index) => {
    if (index === most) return strong(range);
    if (index === least) return weak(range);
    return lowBus ? weak(range) : strong(range);
  });
}

/** A branch at the corner of its range where it gives most. */
function strong({ voltage, resistance }: Range): UnlimitedBranch {
  return { voltage: voltage[1], resistance: resistance[0] };
}

/** A branch at the corner of its range where it gives least. */
function weak({ voltage, resistance }: Range): UnlimitedBranch {
  return { voltage: voltage[0], resistance: resistance[1] };
}

/**
 * The most that any ballast can have to turn into heat, in W. The module in question stands at its highest
 * voltage and lowest droop, all others at their weakest; then its current is E/(R + B) with its own ballast
 * B, R being its droop and the others side by side, and I²·B is largest at B = R, or at the end of the
 * ballast's tolerance that lies nearest. Exact while every module carries something.
 */
export function worstDissipation(group: BallastedGroup): number {
  const { ballast, tolerance, load } = group;
  const ranges = rangesOf(group);
  const powers = ranges.map((range, index) => {
    const others = ranges.filter((_, other) => other !== index).map(weak);
    const droop = range.resistance[0] - ballast * (1 - tolerance);
    const besides = 1 / others.reduce((sum, { resistance }) => sum + 1 / resistance, 0);
    const own = Math.min(ballast * (1 + tolerance), Math.max(ballast * (1 - tolerance), droop + besides));
    const branch = { voltage: range.voltage[1], resistance: droop + own };
    return (branchCurrents([branch, ...others], load)[0] ?? 0) ** 2 * own;
  });
  return Math.max(...powers);
}
