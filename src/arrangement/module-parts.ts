import { formatExact } from '../quantity/format-quantity.js';
import type { Part } from './build.js';
import type { ModuleProfile } from './module-profile.js';

/** The modules as lines of a parts list, those of the same description and label on one. */
export function moduleParts(profiles: readonly ModuleProfile[]): readonly Part[] {
  const kinds = [...new Set(profiles.map(kindOf))];
  return kinds.flatMap((kind): readonly Part[] => {
    const alike = profiles.filter((profile) => kindOf(profile) === kind);
    const [first] = alike;
    if (first === undefined) return [];
    return [
      {
        marks: alike.map(({ name }) => name),
        what: first.description === '' ? 'supply module' : first.description,
        ratings: labelOf(first),
        why: 'as measured, and by its records: another of the same label is another module',
      },
    ];
  });
}

function kindOf(profile: ModuleProfile): string {
  return [profile.description, ...labelOf(profile)].join('\n');
}

function labelOf({ label }: ModuleProfile): readonly string[] {
  const voltage = formatExact(label.voltage, 'voltage');
  const current = formatExact(label.current, 'current');
  return [`${voltage.value} ${voltage.unit}`, `${current.value} ${current.unit}`];
}
