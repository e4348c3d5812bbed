import { named } from '../steps/isolation-prompts.js';
import { cautionTexts } from '../record/caution-texts.js';
import { earthWasWorkedOn } from '../record/earth-changes.js';
import type { TakenOver } from './taken-over.js';
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

/** What is to be wired before anything is switched on; of a run that goes on, also as it was left to stand. */
export function wiringFor(
  { wiring }: Pick<Procedure, 'wiring'>,
  from: Pick<TakenOver, 'standing'> | undefined,
): readonly string[] {
  return [...wiring, ...(from?.standing ?? [])];
}

/**
 * A caution as it is put to the person, with the modules that it is about where it is not about all of several: which
 * of them the mains feed, on whose earth something was done.
 */
export function cautionOf(name: CautionName, { modules }: Pick<UnderTest, 'modules'>): string {
  const concerned = modules.filter(concerns[name]);
  const some = concerned.length > 0 && concerned.length < modules.length;
  return some ? `${cautionTexts[name]} This concerns ${named(concerned)}.` : cautionTexts[name];
}

const all = (): boolean => true;
const concerns: Readonly<Record<CautionName, (module: Module) => boolean>> = {
  mains: ({ input }) => input === 'mains',
  'hot-surfaces': all,
  'stored-charge': all,
  'floating-outputs': all,
  'earth-link-removed': earthWasWorkedOn,
};
