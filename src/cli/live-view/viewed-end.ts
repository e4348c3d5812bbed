import { messageOf } from '../../errors/message-of.js';
import { answer } from '../../report/answer.js';
import type { ViewedEnd } from '../../view/view-state.js';
import type { PlanPerformed } from '../perform-plan.js';
import { safetyWords } from '../safety-words.js';

/** How a run ended, as a page tells it. */
export function viewedEnd(performed: PlanPerformed): ViewedEnd {
  const { ending, understood, folder } = performed;
  return {
    how: ending.how,
    reason: ending.how === 'completed' ? null : ending.reason,
    ...(understood.kind === 'result'
      ? { answer: answer(understood.result), outcome: understood.result.outcome }
      : {
          answer: [`What the record shows could not be told: ${messageOf(understood.error)}`],
          outcome: 'not-judged',
        }),
    safety: safetyWords(performed),
    record: folder.path,
  };
}

/** One that did not come to a record: the bench could not be opened, say, and nothing was switched on. */
export function notBegun(error: unknown): ViewedEnd {
  return {
    how: 'failed',
    reason: messageOf(error),
    answer: [],
    outcome: 'not-judged',
    safety: [],
    record: '',
  };
}
