import type { UnderTest } from '../steps/under-test.js';
import type { Module } from '../files/module.js';
import type { CautionName, Procedure } from '../files/procedure.js';

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
