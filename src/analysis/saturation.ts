import type { Amperes, Ratio } from '../quantity/quantity.js';
import type { GroupLook, ModuleCurrent } from './module-currents.js';

/** The module of a group that met its limit first while the group went on. */
export interface Saturated {
  readonly module: string;
  /** `stays`: its current grows no further, as a constant-current limit makes it; `vanished`: it has left. */
  readonly how: 'stays' | 'vanished';
  /** Its own current there, or the last before it left. */
  readonly current: Amperes;
  /** The group's current there. */
  readonly total: Amperes;
}

/** Of what an equal share would grow by: less is no growth. */
const noGrowth: Ratio = 0.15;
/** Of what it carried before: less is nothing. */
const nothing: Ratio = 0.1;
/** Looks that must follow before a current that stays is more than chance. */
const following = 2;

/**
 * Looked for at the points that the group held, by rising load: the first at which a module's current is the
 * largest of all and grows no further from there to the end, or after which one that carried its part gives
 * nothing any more. Undefined where all go on together, and where it shows at the last point only.
 * @param held by rising load.
 */
export function firstToSaturate(held: readonly GroupLook[]): Saturated | undefined {
  const climb = held.filter(({ time }) => time === 0);
  for (const [index, look] of climb.entries()) {
    for (const each of look.currents) {
      const how = whatBecameOf(each, climb, index);
      if (how !== undefined) {
        return { module: each.module, how, current: each.current, total: look.total };
      }
    }
  }
  return undefined;
}

function whatBecameOf(
  each: ModuleCurrent,
  climb: readonly GroupLook[],
  index: number,
): Saturated['how'] | undefined {
  const [look, last] = [climb[index], climb.at(-1)];
  const later = climb.length - 1 - index;
  if (look === undefined || last === undefined || later === 0) return undefined;
  const { length } = look.currents;
  // From the end, where a current that went on growing has grown most: of a long record one look is enough.
  const fromThenOn = (is: (current: Amperes) => boolean): boolean => {
    for (let at = climb.length - 1; at > index; at -= 1) {
      const current = climb[at]?.currents.find(({ module }) => module === each.module)?.current;
      if (current !== undefined && !is(current)) return false;
    }
    return true;
  };
  const carries = each.current > look.total / length / 2;
  if (carries && fromThenOn((current) => current < nothing * each.current)) return 'vanished';
  const isLargest = look.currents.every(({ current }) => current <= each.current);
  const share = (last.total - look.total) / length;
  if (!isLargest || later < following) return undefined;
  return fromThenOn((current) => Math.abs(current - each.current) < noGrowth * share) ? 'stays' : undefined;
}
