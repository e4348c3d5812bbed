import type { Seconds } from '../quantity/quantity.js';
import type { OperatorRequest } from './operator.js';
import type { StepContext } from './step-kind.js';

/** A person at a question, with something to do. */
export const handTime: Seconds = 15;

/**
 * Asks the person at the bench to do something and waits until it is done; the question and the answer are
 * journalled, so that a record shows what was asked for and when it was done.
 * @throws the signal's reason when the run is stopped.
 */
export async function askToDo(
  { journal, operator, signal, step }: Pick<StepContext, 'journal' | 'operator' | 'signal' | 'step'>,
  { name, text, act }: Required<Pick<OperatorRequest, 'name' | 'text' | 'act'>>,
): Promise<void> {
  signal.throwIfAborted();
  journal.append({ event: 'prompt', step, text, act });
  const answer = await operator.ask({ name, text, act, answer: 'done' }, signal);
  journal.append({ event: 'answer', step, name, answer });
}
