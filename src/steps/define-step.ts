import type { StepKind } from './step-kind.js';

/**
 * A step kind among others, whatever its parameters. The parameters that come back to it are those which
 * its own schema made, so the kinds can stand in one list without anyone knowing what each is told.
 */
export function defineStep<Parameters>(kind: StepKind<Parameters>): StepKind {
  return kind;
}
