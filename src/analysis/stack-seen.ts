import type { Amperes, Volts } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { combine, expandedFor } from '../statistics/uncertainty-budget.js';
import type { Evidence } from './evidence.js';
import { type StackLook, stackLooks, sumBudget, sumUpTo } from './module-voltages.js';
import { oncePerEvidence } from './once-per-evidence.js';
import { isComplete } from './place-looks.js';
import { type Collapse, firstCollapse } from './weakest-module.js';

export { touchable } from '../circuit/touchable.js';

/** How a series string stands and gives way, as its record shows it: findings and charts rest on the same. */
export interface StackSeen {
  readonly looks: readonly StackLook[];
  /** Where the modules' voltages do not add up to the output's: then nothing that rests on them is given. */
  readonly wrong: { readonly look: StackLook; readonly sum: Volts } | undefined;
  /** What was seen of the string with nothing unplugged, by rising current, dropped points among them. */
  readonly climb: readonly StackLook[];
  /** Whose voltage goes first; undefined where none was seen to. */
  readonly collapse: Collapse | undefined;
  /** Which of them were driven below zero by the others, at the lowest that each of them was seen. */
  readonly reversed: readonly Reversed[];
}

/** A module through which the others push a current against its polarity. */
export interface Reversed {
  readonly module: string;
  readonly volts: Volts;
  /** What was asked for then. */
  readonly at: Amperes;
}

/** Undefined where the circuit is no string. */
export const stackSeen = oncePerEvidence(stackOf);

function stackOf(evidence: Evidence): StackSeen | undefined {
  const { header } = evidence;
  if (header.circuit !== 'series') return undefined;
  const looks = stackLooks(evidence);
  const climb = looks
    .filter(({ kind }) => kind === 'together' || kind === 'climb')
    .sort((one, other) => askedOf(one) - askedOf(other));
  return {
    looks,
    wrong: worstSum(header, looks),
    climb,
    collapse: firstCollapse(header, looks),
    reversed: reversedIn(header, climb),
  };
}

/** Below zero by more than it may be off by; what is nothing reads a little below zero as well. */
function reversedIn(header: RunHeader, climb: readonly StackLook[]): readonly Reversed[] {
  return header.modules.flatMap(({ name }) => {
    const below = climb
      .filter(({ modules }) => modules.some(({ module, volts }) => module === name && volts < 0))
      .flatMap((look) => voltagesThere(header, look).map((each) => ({ ...each, at: askedOf(look) })))
      .filter(({ module, volts, expanded }) => module === name && volts + expanded < 0)
      .sort((one, other) => one.volts - other.volts);
    const [lowest] = below;
    return lowest === undefined ? [] : [{ module: name, volts: lowest.volts, at: lowest.at }];
  });
}

/** What flowed; what was asked for where the string dropped out, as nothing of it flowed then. */
export function askedOf({ outcome, set, current }: StackLook): Amperes {
  return outcome === 'dropped' ? (set ?? current) : current;
}

/** A sum that chance makes as wrong as this less often is wrong. */
const strictLevel = 1e-3;

function worstSum(header: RunHeader, looks: readonly StackLook[]): StackSeen['wrong'] {
  let worst: { readonly look: StackLook; readonly sum: Volts; readonly beyond: number } | undefined;
  const places = header.modules.length;
  for (const look of looks) {
    if (!isComplete(look, header) || look.kind === 'after' || look.outcome === 'dropped') continue;
    const sum = sumUpTo(look, places);
    const budget = sumBudget(header, look, { upTo: places, lessOutput: true });
    const allowed = expandedFor(combine(budget), 1 - strictLevel);
    const beyond = Math.abs(sum - look.output) / (allowed + 1e-9 * Math.max(1, Math.abs(look.output)));
    if (beyond > (worst?.beyond ?? 1)) worst = { look, sum, beyond };
  }
  return worst;
}

/** Where the plus of each module stands above the 0 V of the string at a look, the lowest first, with its 95 %. */
export function heightsThere(
  header: RunHeader,
  look: StackLook,
): readonly { readonly module: string; readonly top: Volts; readonly expanded: Volts }[] {
  return look.modules.map(({ module, place }) => ({
    module,
    top: sumUpTo(look, place),
    expanded: combine(sumBudget(header, look, { upTo: place, lessOutput: false })).expanded,
  }));
}

/** What each module gives at its own output at a look, before whatever is in series with it, with its 95 %. */
export function voltagesThere(
  header: RunHeader,
  look: StackLook,
): readonly { readonly module: string; readonly volts: Volts; readonly expanded: Volts }[] {
  const unloaded = { ...look, current: 0 };
  return look.modules.map(({ module, place, volts }) => ({
    module,
    volts,
    expanded: combine(sumBudget(header, unloaded, { from: place, upTo: place, lessOutput: false })).expanded,
  }));
}
