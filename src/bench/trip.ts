import {
  ConnectionLostError,
  InstrumentSilentError,
  InstrumentUnreachableError,
  OutOfStepError,
} from '../instrument/errors.js';
import { GuardTrippedError } from './bench-error.js';

/** What ended a run, as the journal has it. */
export interface Trip {
  readonly guard: string;
  readonly text: string;
}

const silences = [InstrumentSilentError, OutOfStepError, ConnectionLostError, InstrumentUnreachableError];

/**
 * Which guard an error comes from, if from any. An instrument that is silent or lost for good is one too, called
 * `silence`: what can't be read is not guarded.
 */
export function tripOf(error: unknown): Trip | undefined {
  if (error instanceof GuardTrippedError) return { guard: error.guard, text: error.message };
  const silence = silences.some((kind) => error instanceof kind);
  return silence && error instanceof Error ? { guard: 'silence', text: error.message } : undefined;
}
