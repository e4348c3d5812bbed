import type { UnderTest } from '../steps/under-test.js';
import type { Module } from '../files/module.js';
import type { CautionName, Procedure } from '../files/procedure.js';

/** What must be read and acknowledged before anything is energised. */
export const cautionTexts: Readonly<Record<CautionName, string>> = {
  mains:
    'The module is fed from the mains. Its case stays closed while it is plugged in, nothing inside is touched or measured, and the socket is within reach.',
  'hot-surfaces':
    'Module, load and leads get hot at the limit and stay hot for a while. Keep them clear of anything that burns and do not leave them covered.',
  'stored-charge':
    'Capacitors hold their charge after the plug is out. Wait, then prove the output dead with the meter before touching it.',
  'floating-outputs':
    'Outputs in a stack float at the sum of the voltages below them. Above 60 V DC they are no longer touch-safe.',
  'earth-link-removed':
    'A change of this module has to do with earth. Without its earth link an output has lost the protection against a fault from primary to secondary. Use a residual-current device; local codes and a licensed person decide whether it may be used so.',
};

/**
 * What must be acknowledged for a procedure on what is connected: what the procedure names, and what the
 * modules' own files tell whatever the procedure forgot: that one is fed from the mains, that its earth was
 * worked on; and that a stack floats.
 */
export function cautionsFor(
  procedure: Procedure,
  { circuit, modules }: Pick<UnderTest, 'circuit' | 'modules'>,
): readonly CautionName[] {
  return [
    ...new Set([
      ...(modules.some(({ input }) => input === 'mains') ? (['mains'] as const) : []),
      ...procedure.cautions,
      ...(circuit === 'series' ? (['floating-outputs'] as const) : []),
      ...(modules.some(earthWasWorkedOn) ? (['earth-link-removed'] as const) : []),
    ]),
  ];
}

function earthWasWorkedOn({ changes }: Module): boolean {
  return changes.some(({ what }) => /\bearth/i.test(what));
}
