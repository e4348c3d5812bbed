import type { Amperes, Ratio } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { combine } from '../statistics/uncertainty-budget.js';
import type { Evidence } from './evidence.js';
import { heldLooks } from './held-looks.js';
import { currentsAddUp, type Kirchhoff } from './kirchhoff.js';
import { expandedCurrent, type GroupLook, groupLooks } from './module-currents.js';
import { oncePerEvidence } from './once-per-evidence.js';
import { firstToSaturate, type Saturated } from './saturation.js';
import { shareBudget, sumOf } from './shares.js';

/** How a parallel group shares its load, as its record shows it: findings and charts rest on the same. */
export interface SharingSeen {
  /** All looks, those with a module unplugged among them. */
  readonly looks: readonly GroupLook[];
  /** Whether the modules' currents may be believed. */
  readonly kirchhoff: Kirchhoff;
  /** The points it held, by rising load; empty where the currents may not be believed. */
  readonly held: readonly GroupLook[];
  readonly saturated: Saturated | undefined;
}

/** Undefined where the circuit is no group. */
export const sharingSeen = oncePerEvidence(sharingOf);

function sharingOf(evidence: Evidence): SharingSeen | undefined {
  const { header } = evidence;
  if (header.circuit !== 'parallel') return undefined;
  const looks = groupLooks(evidence);
  const kirchhoff = currentsAddUp(header, looks);
  const isWrong = kirchhoff.kind === 'wrong-ballasts' || kirchhoff.kind === 'unexplained';
  const held = isWrong ? [] : heldLooks(header, looks);
  return { looks, kirchhoff, held, saturated: firstToSaturate(held) };
}

/** What one module carries at a look, as it was read. */
export interface ShareRead {
  readonly module: string;
  readonly current: Amperes;
  /** Of the sum of all. */
  readonly share: Ratio;
}

/** With what it may be off by, 95 %. */
export interface ShareThere extends ShareRead {
  readonly currentExpanded: Amperes;
  readonly shareExpanded: Ratio;
}

/** Of every module at a look, in the order of the circuit. */
export function sharesRead(look: GroupLook): readonly ShareRead[] {
  const sum = sumOf(look);
  return look.currents.map(({ module, current }) => ({ module, current, share: current / sum }));
}

/** The same with its uncertainties, which take some work to reckon. */
export function sharesThere(header: RunHeader, look: GroupLook): readonly ShareThere[] {
  return sharesRead(look).map((read, index) => ({
    ...read,
    currentExpanded: expandedCurrent(header, look, index),
    shareExpanded: combine(shareBudget(header, look, index)).expanded,
  }));
}
