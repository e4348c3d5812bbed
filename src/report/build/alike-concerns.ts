import type { Concern } from '../../arrangement/build.js';

/** What holds for several modules, said once. */
export interface AlikeConcerns {
  readonly weight: Concern['weight'];
  readonly text: string;
  readonly modules: readonly string[];
  readonly runs: readonly string[];
}

/** In the order in which they first appear; what nothing can be decided on first. */
export function alikeConcerns(concerns: readonly Concern[]): readonly AlikeConcerns[] {
  const alike = new Map<string, Concern[]>();
  for (const concern of concerns) {
    const key = `${concern.weight} ${concern.text}`;
    alike.set(key, [...(alike.get(key) ?? []), concern]);
  }
  const groups = [...alike.values()].flatMap((group): readonly AlikeConcerns[] => {
    const [first] = group;
    if (first === undefined) return [];
    return [
      {
        weight: first.weight,
        text: first.text,
        modules: [...new Set(group.map(({ module }) => module))],
        runs: [...new Set(group.flatMap(({ run }) => run ?? []))],
      },
    ];
  });
  return [
    ...groups.filter(({ weight }) => weight === 'hinders'),
    ...groups.filter(({ weight }) => weight === 'weakens'),
  ];
}
