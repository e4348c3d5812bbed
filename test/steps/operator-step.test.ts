import { describe, expect, it } from 'vitest';
import { simulatedOperator } from '../../src/cli/simulated-operator.js';
import type { Operator, OperatorRequest } from '../../src/steps/operator.js';
import { nobody, stage } from './one-step.js';

/** Someone who gives these answers, one after the other, and remembers what they were asked. */
function someone(...answers: string[]): Operator & { readonly asked: OperatorRequest[] } {
  const asked: OperatorRequest[] = [];
  return {
    ...nobody,
    present: true,
    asked,
    ask: (request) => {
      asked.push(request);
      return Promise.resolve(answers.shift() ?? '');
    },
  };
}

describe('the operator step', () => {
  it('asks to do something, and records that it was done', async () => {
    const operator = someone('done');
    const { perform, events } = await stage({ operator });
    await perform('operator', { name: 'fan', ask: 'Switch the fan on.', act: 'unplug' });
    expect(operator.asked).toEqual([
      { name: 'fan', text: 'Switch the fan on.', act: 'unplug', answer: 'done' },
    ]);
    expect(events).toMatchObject([
      { event: 'prompt', step: 1, text: 'Switch the fan on.', act: 'unplug' },
      { event: 'answer', step: 1, name: 'fan', answer: 'done' },
    ]);
  });

  it('records a text as it was given', async () => {
    const { perform, the } = await stage({ operator: someone('smells of dust') });
    await perform('operator', { name: 'smell', ask: 'How does it smell?', answer: 'text' });
    expect(the('answer')).toMatchObject([{ name: 'smell', answer: 'smells of dust' }]);
    expect(the('answer')[0]).not.toHaveProperty('value');
  });

  it('records a quantity in its unit beside what was said', async () => {
    const { perform, the } = await stage({ operator: someone('350 mΩ') });
    await perform('operator', { name: 'link', ask: 'What does the link read?', answer: 'resistance' });
    expect(the('answer')).toMatchObject([{ answer: '350 mΩ', value: 0.35, dimension: 'resistance' }]);
  });

  it('asks again, saying why, when the answer is not understood', async () => {
    const operator = someone('23', 'warm', '23 °C');
    const { perform, the } = await stage({ operator });
    await perform('operator', { name: 'ambient', ask: 'How warm is the air?', answer: 'temperature' });
    expect(operator.asked.map(({ text }) => text)).toEqual([
      'How warm is the air?',
      expect.stringMatching(/^That was not understood: found the bare number 23; .*\nHow warm is the air\?$/),
      expect.stringMatching(/^That was not understood: found 'warm'; .*\nHow warm is the air\?$/),
    ]);
    expect(the('notice').map(({ text }) => text)).toEqual([
      expect.stringMatching(/^the answer was not understood: found the bare number 23; /),
      expect.stringMatching(/^the answer was not understood: found /),
    ]);
    expect(the('answer')).toMatchObject([{ value: 23, dimension: 'temperature' }]);
    expect(the('prompt')).toHaveLength(1);
  });

  it('gives up after five answers that are not understood, and not never', async () => {
    const { perform, the } = await stage({ operator: ({ simulation }) => simulatedOperator(simulation) });
    await expect(
      perform('operator', { name: 'ambient', ask: 'How warm is the air?', answer: 'temperature' }),
    ).rejects.toMatchObject({
      code: 'ANSWER_NOT_UNDERSTOOD',
      exitCode: 3,
      attempts: 5,
      message: expect.stringMatching(
        /^the answer to "ambient" was not understood 5 times; the last time: found /,
      ) as string,
    });
    expect(the('answer')).toEqual([]);
  });

  it('takes what the simulation says the operator answers', async () => {
    const { perform, the } = await stage({
      simulation: { answers: { ambient: '21.5 °C' } },
      operator: ({ simulation }) => simulatedOperator(simulation),
    });
    await perform('operator', { name: 'ambient', ask: 'How warm is the air?', answer: 'temperature' });
    expect(the('answer')).toMatchObject([{ value: 21.5 }]);
  });
});
