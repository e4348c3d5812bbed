import { describe, expect, it } from 'vitest';
import { type Asked, Questions } from '../../src/view/questions.js';
import type { Question } from '../../src/view/view-state.js';
import fc from '../property.js';

const never = new AbortController().signal;
const wiring: Asked = { heading: 'Is it wired so?', text: 'Load to the module.', answer: 'yes' };
const unplug: Asked = { heading: 'To do: unplug', text: 'Unplug K1.', answer: 'done' };
const remark: Asked = { heading: 'To tell: remark', text: 'What is seen?', answer: 'text' };

function questions() {
  const shown: (Question | undefined)[] = [];
  return { desk: new Questions((question) => shown.push(question)), shown };
}

describe('what a page is asked', () => {
  it('is shown until it is answered, and its first answer counts', async () => {
    const { desk, shown } = questions();
    const answer = desk.ask(wiring, never);
    expect(shown).toEqual([{ ...wiring, id: 1 }]);
    expect(desk.answer(1, 'yes')).toEqual({ kind: 'taken' });
    expect(desk.answer(1, 'no')).toEqual({ kind: 'not-open' });
    expect(await answer).toBe('yes');
    expect(shown).toEqual([{ ...wiring, id: 1 }, undefined]);
  });

  it('has another number each time, so that a late answer is not taken for the next one', async () => {
    const { desk } = questions();
    const first = desk.ask(wiring, never);
    desk.answer(1, 'yes');
    await first;
    const second = desk.ask(wiring, never);
    expect(desk.answer(1, 'no')).toEqual({ kind: 'not-open' });
    expect(desk.answer(2, 'no')).toEqual({ kind: 'taken' });
    expect(await second).toBe('no');
  });

  it('is not open before it is asked', () => {
    expect(questions().desk.answer(1, 'yes')).toEqual({ kind: 'not-open' });
  });

  it('is taken away with the reason, and nothing is taken for its answer any more', async () => {
    const { desk, shown } = questions();
    const stop = new AbortController();
    const answer = desk.ask(unplug, stop.signal);
    stop.abort(new Error('stopped'));
    await expect(answer).rejects.toThrow('stopped');
    expect(shown.at(-1)).toBeUndefined();
    expect(desk.answer(1, 'done')).toEqual({ kind: 'not-open' });
  });

  it('is not even shown once the run is to end', async () => {
    const { desk, shown } = questions();
    await expect(desk.ask(wiring, AbortSignal.abort(new Error('stopped')))).rejects.toThrow('stopped');
    expect(shown).toEqual([]);
  });

  it('is closed once: a stop after the answer changes nothing', async () => {
    const { desk, shown } = questions();
    const stop = new AbortController();
    const answer = desk.ask(unplug, stop.signal);
    desk.answer(1, 'done');
    stop.abort(new Error('stopped'));
    expect(await answer).toBe('done');
    expect(shown).toHaveLength(2);
  });

  it.each([
    [wiring, 'yes please', 'Answer yes or no.'],
    [wiring, '', 'Answer yes or no.'],
    [unplug, 'yes', 'Say done once it is done.'],
    [remark, '  ', 'Nothing was typed.'],
    [remark, 'warm\nand loud', 'An answer is one line, without control characters.'],
    [remark, '\u001b[2J', 'An answer is one line, without control characters.'],
  ])('stays open where the answer can be none: %o %j', async (asked, given, why) => {
    const { desk } = questions();
    const answer = desk.ask(asked, never);
    expect(desk.answer(1, given)).toEqual({ kind: 'not-taken', why });
    const right = asked.answer === 'text' ? 'warm' : asked.answer;
    expect(desk.answer(1, ` ${right} `)).toEqual({ kind: 'taken' });
    expect(await answer).toBe(right);
  });

  it('takes any line that says something, as it was typed', async () => {
    const line = fc.string({ minLength: 1, unit: 'grapheme' }).filter((text) => !/\p{Cc}|^\s*$/u.test(text));
    await fc.assert(
      fc.asyncProperty(line, async (typed) => {
        const { desk } = questions();
        const answer = desk.ask(remark, never);
        expect(desk.answer(1, typed)).toEqual({ kind: 'taken' });
        expect(await answer).toBe(typed.trim());
      }),
    );
  });
});
