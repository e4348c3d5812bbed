import type { Concern, Standing } from './build.js';

/**
 * What may be done with a build. A refusal outweighs every doubt, and a record that something hinders is a
 * doubt, but for a module that did not conform or failed, which is a refusal. Nothing may be built but what
 * neither speaks against.
 * @param found sentences.
 */
export function standingOf(found: {
  readonly refusals: readonly string[];
  readonly doubts: readonly string[];
  readonly concerns: readonly Concern[];
}): Standing {
  const hindering = found.concerns.filter(({ weight }) => weight === 'hinders');
  const said = (concerns: readonly Concern[]): readonly string[] =>
    concerns.map(({ module, text }) => `${module}: ${text}.`);
  const failed = hindering.filter(({ kind }) => kind === 'not-accepted');
  const refusals = [...found.refusals, ...said(failed)];
  if (refusals.length > 0) return { kind: 'must-not-be-built', because: refusals };
  const doubts = [...found.doubts, ...said(hindering)];
  return doubts.length > 0 ? { kind: 'cannot-tell', because: doubts } : { kind: 'may-be-built' };
}
