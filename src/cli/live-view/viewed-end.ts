import { FoundOnError } from '../../bench/found-on.js';
import { messageOf } from '../../errors/message-of.js';
import { exitCodeOf, exitCodes, RailproofError } from '../../errors/railproof-error.js';
import { capitalised } from '../../quantity/capitalised.js';
import type { RunFolder } from '../../record/run-folder.js';
import { answer } from '../../report/answer.js';
import type { Performed } from '../../run/perform.js';
import type { ViewedEnd, ViewedLeft } from '../../view/view-state.js';
import { type PlanPerformed, reportOf } from '../perform-plan.js';
import { safetyWords } from '../safety-words.js';

/** How a run ended and left the bench, as a page tells it while its record is worked out. */
export function viewedLeft(performed: Performed, folder: RunFolder): ViewedLeft {
  const { ending } = performed;
  return {
    how: ending.how,
    reason: ending.how === 'completed' ? null : ending.reason,
    safety: safetyWords(performed),
    record: folder.path,
  };
}

/** The same, and what the record shows. */
export function viewedEnd(performed: PlanPerformed): ViewedEnd {
  const { understood, folder } = performed;
  return {
    ...viewedLeft(performed, folder),
    ...(understood.kind === 'result'
      ? { answer: answer(understood.result), outcome: understood.result.outcome }
      : {
          answer: [`What the record shows could not be told: ${messageOf(understood.error)}`],
          outcome: 'not-judged',
        }),
    report: reportOf(performed) ?? null,
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
    report: null,
  };
}
