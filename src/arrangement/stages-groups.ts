import { listed } from '../quantity/listed.js';
import type { Amperes } from '../quantity/quantity.js';
import { roundedDown } from '../quantity/rounded-down.js';
import { modulesOf, type Concern, type Form } from './build.js';
import { type LaidOut, within } from './laid-out.js';
import type { ModuleProfile } from './module-profile.js';
import { littleUse } from './parallel-standing.js';
import type { StagesWish } from './stages-wish.js';
import { worstOf } from './worst-form.js';

/**
 * Whether the groups of the arrangements do what groups are for, by the worst case: one that gives less than
 * its best part alone is doubted, and a module that adds hardly anything is named. Diodes are left out of it.
 */
export function groupStanding(
  profiles: readonly ModuleProfile[],
  { laid, wish }: { readonly laid: readonly LaidOut[]; readonly wish: Pick<StagesWish, 'ballast'> },
): { readonly doubts: readonly string[]; readonly concerns: readonly Concern[] } {
  const { ballast } = wish;
  const goodFor = (form: Form): Amperes =>
    worstOf(form, profiles, ballast, (module) => within(module, ballast).current).limit;
  const found = laid.flatMap(({ found: { name, circuit } }) =>
    groupsIn(circuit.form).map((group) => judged(name, group, goodFor)),
  );
  return {
    doubts: found.flatMap(({ doubt }) => doubt),
    concerns: found.flatMap(({ concerns }) => concerns),
  };
}

type Group = Extract<Form, { readonly kind: 'group' | 'stack' }>;

function groupsIn(form: Form): readonly Group[] {
  if (form.kind === 'module') return [];
  return [...(form.kind === 'group' ? [form] : []), ...form.of.flatMap(groupsIn)];
}

function judged(
  arrangement: string,
  group: Group,
  goodFor: (form: Form) => Amperes,
): { readonly doubt: readonly string[]; readonly concerns: readonly Concern[] } {
  const all = goodFor(group);
  const parts = group.of.map((part) => ({ part, alone: goodFor(part) }));
  const [best] = parts.toSorted((one, other) => other.alone - one.alone);
  if (best !== undefined && all < best.alone) {
    const doubt = `In ${arrangement} ${listed(group.of.map(partInWords))} side by side are good for ${roundedDown(all, 'current')}, less than ${partInWords(best.part)} alone, ${roundedDown(best.alone, 'current')}: the others do it no good. Put side by side what is alike.`;
    return { doubt: [doubt], concerns: [] };
  }
  const concerns = parts.flatMap(({ part, alone }): readonly Concern[] => {
    const rest = group.of.filter((each) => each !== part);
    if (part.kind !== 'module' || rest.length === 0) return [];
    const without = goodFor({ kind: 'group', of: rest });
    if (all - without >= littleUse * alone) return [];
    return [
      {
        kind: 'of-little-use',
        module: part.name,
        run: undefined,
        weight: 'weakens',
        text: `without it the group in ${arrangement} is good for ${roundedDown(without, 'current')}, with it for ${roundedDown(all, 'current')}: leave it out there, or put it with modules that are more like it`,
      },
    ];
  });
  return { doubt: [], concerns };
}

function partInWords(part: Form): string {
  if (part.kind === 'module') return part.name;
  return `the ${part.kind} of ${listed(modulesOf(part))}`;
}
