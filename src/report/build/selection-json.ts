import type { Assignment, Selection } from '../../arrangement/selection.js';
import { ballastWishAsJson } from './combination-json.js';
import { circuitAsJson, commonAsJson } from './json-parts.js';
import { valueAsJson } from './json-values.js';
import type { SelectionJson } from '../schema/selection-schema.js';

/** The name and version of the format; the number changes when a reader would have to. */
export const selectionFormat = 'railproof/selection 1';

/**
 * Which modules of a drawer to put together, as one JSON object; numbers, `standing`, `outcome` and `modules`
 * as in {@link combinationAsJson}. `best` is null where the drawer does not hold enough, `next` where there is
 * no other way; both are lists of supplies, each a list of groups, the lowest of a stack first.
 */
export function selectionAsJson(selection: Selection): SelectionJson {
  const { wish, best, next, margin, leftOut, considered, unused, circuit } = selection;
  return {
    format: selectionFormat,
    ...commonAsJson(selection),
    wish: {
      group: wish.group,
      stack: wish.stack,
      supplies: wish.supplies,
      ...ballastWishAsJson(wish),
    },
    best: best === undefined ? null : assignmentAsJson(best),
    next: next === undefined ? null : assignmentAsJson(next),
    margin:
      margin === undefined
        ? null
        : {
            current: valueAsJson(margin.current, 'current'),
            imbalance: valueAsJson(margin.imbalance, 'ratio'),
            told: margin.told,
            sentence: margin.sentence,
          },
    considered,
    unused,
    leftOut: leftOut.map(({ module, why }) => ({ module, why })),
    circuit: circuit === undefined ? null : circuitAsJson(circuit),
  };
}

function assignmentAsJson({
  supplies,
  recommended,
  imbalance,
  ballast,
}: Assignment): NonNullable<SelectionJson['best']> {
  return {
    recommended: valueAsJson(recommended, 'current'),
    imbalance: valueAsJson(imbalance, 'ratio'),
    ballast: ballast === undefined ? null : valueAsJson(ballast, 'resistance'),
    supplies: supplies.map((supply) => ({
      recommended: valueAsJson(supply.recommended, 'current'),
      groups: supply.groups.map((group) => ({
        modules: group.modules,
        recommended: valueAsJson(group.recommended, 'current'),
        imbalance: valueAsJson(group.imbalance, 'ratio'),
      })),
    })),
  };
}
