import { FoundOnError } from '../../bench/found-on.js';
import { messageOf } from '../../errors/message-of.js';
import { exitCodeOf, exitCodes, RailproofError } from '../../errors/railproof-error.js';
import { capitalised } from '../../quantity/capitalised.js';
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

/** One that did not come to a record: the bench could not be opened, say. We switched nothing on; whoever was before us may have. */
export function notBegun(error: unknown): ViewedEnd {
  const advice = error instanceof RailproofError ? error.advice : undefined;
  const isOn = error instanceof FoundOnError;
  return {
    how: exitCodeOf(error) === exitCodes.stopped ? 'stopped' : 'failed',
    reason: messageOf(error),
    answer: advice === undefined || isOn ? [] : [capitalised(advice)],
    outcome: 'not-judged',
    safety: isOn ? [{ what: 'load', confirmed: false, text: capitalised(advice ?? '') }] : [],
    record: '',
  };
}
