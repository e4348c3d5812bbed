import { type EarthRelation, earthRelations } from '../circuit/earth-relation.js';
import { type ReferenceName, references } from '../quantity/quantity.js';
import type { Carried } from '../record/journal-event.js';
import type { Known, Tried } from '../steps/step-kind.js';

/** Where a run that goes on begins, and what the steps before it found out. */
export interface TakenOver {
  /** How many steps are done. */
  readonly steps: number;
  readonly known: Known;
  readonly tried: Tried;
  readonly earths: ReadonlyMap<string, EarthRelation>;
  /** How the bench must stand for it, a line each; acknowledged with the wiring. */
  readonly standing: readonly string[];
}

/**
 * What a record carries, in the words that steps understand.
 * @throws RangeError naming a word that none of them does
 */
export function parseCarried(carried: Carried): Pick<TakenOver, 'known' | 'tried' | 'earths'> {
  const known: Known = {};
  for (const [name, value] of Object.entries(carried.known)) {
    if (!isReference(name)) throw new RangeError(`nothing that is measured is called "${name}"`);
    known[name] = value;
  }
  const earths = new Map<string, EarthRelation>();
  for (const [module, word] of Object.entries(carried.earths)) {
    const relation = earthRelations.find((one) => one === word);
    if (relation === undefined) throw new RangeError(`no output stands to earth as "${word}"`);
    earths.set(module, relation);
  }
  const { held, dropped } = carried.tried;
  return {
    known,
    tried: { ...(held === undefined ? {} : { held }), ...(dropped === undefined ? {} : { dropped }) },
    earths,
  };
}

function isReference(name: string): name is ReferenceName {
  return Object.hasOwn(references, name);
}
