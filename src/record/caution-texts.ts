/** What must be read and acknowledged before anything is energised, by the names that procedures and records use. */
export const cautionTexts = {
  mains:
    'The module is fed from the mains. Its case stays closed while it is plugged in, nothing inside is touched or measured, and the socket is within reach.',
  'hot-surfaces':
    'Module, load and leads get hot at the limit and stay hot for a while. Keep them clear of anything that burns and do not leave them covered.',
  'stored-charge':
    'Capacitors hold their charge after the plug is out. Wait, then prove the output dead with the meter before touching it.',
  'floating-outputs':
    'Outputs in a stack float at the sum of the voltages below them. Above 60 V DC they are no longer touch-safe.',
  'earth-link-removed':
    'A change that was made has to do with earth. Without its earth link an output has lost the protection against a fault from primary to secondary. Use a residual-current device; local codes and a licensed person decide whether it may be used so.',
} as const;

/** Undefined for a name that only another version knows. */
export function cautionText(name: string): string | undefined {
  const texts: Readonly<Record<string, string>> = cautionTexts;
  return Object.hasOwn(texts, name) ? texts[name] : undefined;
}
