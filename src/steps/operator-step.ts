import * as z from '../libraries/zod.js';
import { choice, line } from '../files/building-blocks.js';
import { dimensions, type Dimension } from '../quantity/quantity.js';
import { parseQuantity } from '../quantity/parse-quantity.js';
import { QuantityError } from '../quantity/quantity-error.js';
import { defineStep } from './define-step.js';
import { AnswerNotUnderstoodError } from './step-error.js';

const answers = ['done', 'text', ...(Object.keys(dimensions) as Dimension[])] as const;

/** A person who mistypes is asked again; what answers the same for ever must not hold the run for ever. */
const mostAttempts = 5;

export const operatorStep = defineStep({
  kind: 'operator',
  summary: 'asks the person at the bench to do or to read something; the answer is recorded',
  parameters: z.strictObject({
    name: z
      .string()
      .regex(/^[a-z][a-z0-9-]{0,40}$/, 'a name is written in small letters, digits and hyphens')
      .describe('the name under which the answer is recorded'),
    ask: line('what to do or to read, as one would say it', 500),
    act: line('the act asked for, which a simulated operator performs', 60).optional(),
    answer: choice(answers, 'what kind of answer is expected').default('done'),
  }),
  measures: [],
  needs: { liveModule: false, operator: 'always' },
  references: () => ({}),
  currents: [],
  describe: ({ ask }) => `asks: ${ask}`,
  duration: () => 30,
  async perform({ name, ask, act, answer }, { operator, journal, signal, step }) {
    let text = ask;
    journal.append({ event: 'prompt', step, text: ask, ...(act === undefined ? {} : { act }) });
    for (let attempt = 1; ; attempt += 1) {
      const given = await operator.ask({ name, text, answer, ...(act === undefined ? {} : { act }) }, signal);
      if (answer === 'done' || answer === 'text') {
        journal.append({ event: 'answer', step, name, answer: given });
        return;
      }
      try {
        const value = parseQuantity(given, answer);
        journal.append({ event: 'answer', step, name, answer: given, value, dimension: answer });
        return;
      } catch (error) {
        if (!(error instanceof QuantityError)) throw error;
        if (attempt === mostAttempts) {
          throw new AnswerNotUnderstoodError({ question: name, attempts: attempt, cause: error });
        }
        journal.append({ event: 'notice', text: `the answer was not understood: ${error.message}` });
        text = `That was not understood: ${error.message}.\n${ask}`;
      }
    }
  },
});
