import type { SelectedSupply, Selection } from '../../arrangement/selection.js';

/** `K1 ∥ K2`, `(K1 ∥ K2) + (K3 ∥ K4)`, the lowest first. */
export function inSigns({ groups }: SelectedSupply): string {
  const signs = groups.map(({ modules }) => modules.join(' ∥ '));
  if (signs.length === 1) return signs[0] ?? '';
  return signs.map((each) => (each.includes('∥') ? `(${each})` : each)).join(' + ');
}

/** The modules of the best; where there is none, all that there are. */
export function chosenOf({ best, modules }: Selection): Selection['modules'] {
  if (best === undefined) return modules;
  const names = best.supplies.flatMap(({ groups }) => groups.flatMap((group) => group.modules));
  return modules.filter(({ name }) => names.includes(name));
}

/** Of several supplies, which one the circuit is of, and how the parts of all are told apart. */
export function firstDrawn({ best, standing }: Selection): string | undefined {
  const [first, ...others] = best?.supplies ?? [];
  if (first === undefined || others.length === 0 || standing.kind !== 'may-be-built') return undefined;
  return `all are wired alike, and the sheet draws ${inSigns(first)}; the numbers of their parts go on from one supply to the next`;
}

/** `2 modules side by side`. */
export function wished({ group, stack, supplies }: Selection['wish']): string {
  const each = supplies === 1 ? '' : ' each';
  if (stack === 1) return group === 1 ? `one module${each}` : `${group} modules${each} side by side`;
  return group === 1 ? `${stack} modules${each} in a stack` : `${stack} groups of ${group}${each} in a stack`;
}
