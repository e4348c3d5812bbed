import type { Evidence } from './evidence.js';
import { type Finding, inWords } from './finding.js';

/**
 * `answer-of-<name>`: what the operator was asked for, under the name the procedure gave it. The first
 * words keep what a person said apart from what was measured, whatever the name.
 */
export function answerFindings(evidence: Evidence): readonly Finding[] {
  return stepsWithAnswers(evidence).map(({ step, answer }) => {
    const words = inWords(`answer-of-${answer.name}`, answer.answer, {
      step,
      note: 'as the operator read it',
    });
    return answer.value === undefined || answer.dimension === undefined
      ? words
      : { ...words, value: answer.value, dimension: answer.dimension };
  });
}

function stepsWithAnswers(
  evidence: Evidence,
): { step: number; answer: Evidence['steps'][number]['answers'][number] }[] {
  return evidence.steps
    .filter((step) => step.kind === 'operator')
    .flatMap((step) => step.answers.map((answer) => ({ step: step.step, answer })));
}
