import type { Performed } from '../run/perform.js';

/** Whether something is off, in words. */
export interface SafetyWords {
  readonly what: 'load' | 'source';
  readonly confirmed: boolean;
  readonly text: string;
}

/** What is off first, then what a person must see to, and of that the load last, as the last words count. */
export function safetyWords({
  safety,
  sourceSafety,
}: Pick<Performed, 'safety' | 'sourceSafety'>): readonly SafetyWords[] {
  const each = [
    { what: 'load' as const, safety },
    ...(sourceSafety === undefined ? [] : [{ what: 'source' as const, safety: sourceSafety }]),
  ];
  const off = each.flatMap(({ what, safety }) =>
    safety.kind === 'confirmed'
      ? [{ what, confirmed: true, text: `The ${what} is off; it was read back.` }]
      : [],
  );
  const unsure = each.reverse().flatMap(({ what, safety }) => {
    if (safety.kind === 'confirmed') return [];
    const text = `It could not be confirmed that the ${what} is off: ${safety.why}\n${safety.advice}`;
    return [{ what, confirmed: false, text }];
  });
  return [...off, ...unsure];
}
