import { PassThrough } from 'node:stream';
import { describe, expect, it } from 'vitest';
import { operatorAtBoth } from '../../../src/cli/live-view/operator-at-both.js';
import { StoppedByOperator } from '../../../src/run/stopped.js';
import { TerminalOperator } from '../../../src/run/terminal-operator.js';
import { Questions } from '../../../src/view/questions.js';
import type { Question } from '../../../src/view/view-state.js';
import { until } from '../../whole/at-the-bench.js';

const never = new AbortController().signal;
const unplug = { name: 'unplug', text: 'Unplug K1.', answer: 'done' } as const;
const warmth = { name: 'ambient', text: 'How warm is it?', answer: 'temperature' } as const;

/** A person who may type at a terminal and answer in a view; both are the program's own. */
function person({ isTTY = true, yes = false } = {}) {
  const input = Object.assign(new PassThrough(), { isTTY });
  const output = new PassThrough();
  let text = '';
  output.on('data', (chunk: Buffer) => {
    text += chunk.toString();
  });
  const terminal = new TerminalOperator({ input, output, yes, interrupted: () => undefined });
  const shown: (Question | undefined)[] = [];
  const view = new Questions((question) => shown.push(question));
  const said: string[] = [];
  const operator = operatorAtBoth({ terminal, view, yes, say: (line) => said.push(line) });
  return {
    ...{ operator, said, shown, input },
    terminal: () => text,
    type: (line: string) => input.write(`${line}\n`),
    /** Answers whatever is asked in the view now. */
    answer: (given: string) => view.answer(shown.at(-1)?.id ?? 0, given),
    /** Once both places ask. */
    asked: (words: RegExp) => until(() => words.test(text) && shown.at(-1) !== undefined),
  };
}

describe('a question is asked at the terminal and in the view at once', () => {
  it('is answered by whoever types first, and taken away from the view', async () => {
    const { operator, type, shown, answer, asked, said } = person();
    const given = operator.ask(warmth, never);
    await asked(/How warm is it\?/);
    expect(shown).toMatchObject([{ heading: 'To read: ambient', answer: 'temperature' }]);
    type('23.5 degC');
    expect(await given).toBe('23.5 degC');
    expect(shown.at(-1)).toBeUndefined();
    expect(answer('19 degC')).toEqual({ kind: 'not-open' });
    expect(said).toEqual([]);
  });

  it('is answered by whoever is quicker in the view, which is said at the terminal', async () => {
    const { operator, answer, asked, said, type, terminal } = person();
    const given = operator.ask(warmth, never);
    await asked(/How warm is it\?/);
    expect(answer('19 degC')).toEqual({ kind: 'taken' });
    expect(await given).toBe('19 degC');
    expect(said).toEqual(['Answered in the live view: 19 degC']);

    const next = operator.ask(unplug, never);
    await asked(/Unplug K1\.[^]*Press Enter/);
    type('');
    expect(await next).toBe('done');
    expect(terminal().match(/Press Enter/g)).toHaveLength(1);
  });

  it('takes nothing that was begun at the terminal for the answer to the next question', async () => {
    const { operator, answer, asked, input } = person();
    const first = operator.ask(warmth, never);
    await asked(/How warm is it\?/);
    input.write('no');
    answer('19 degC');
    await first;
    const second = operator.acknowledge('mains', 'It is fed from the mains.', never);
    await asked(/from the mains/);
    input.write('yes\n');
    expect(await second).toBe('operator');
  });

  it.each([
    ['yes', 'operator'],
    ['no', 'refused'],
  ])('a caution that is answered %s in the view is %s', async (given, result) => {
    const { operator, answer, asked, shown } = person();
    const acknowledged = operator.acknowledge('hot-surfaces', 'It gets hot.', never);
    await asked(/It gets hot/);
    expect(shown.at(-1)).toMatchObject({
      heading: 'Hot surfaces: understood and taken care of?',
      text: 'It gets hot.',
      answer: 'yes',
    });
    expect(answer(given)).toEqual({ kind: 'taken' });
    expect(await acknowledged).toBe(result);
  });

  it.each([
    ['yes', 'operator'],
    ['nearly', 'refused'],
  ])('a caution at which %s is typed is %s', async (given, result) => {
    const { operator, type, asked, shown } = person();
    const acknowledged = operator.acknowledge('mains', 'It is fed from the mains.', never);
    await asked(/from the mains/);
    type(given);
    expect(await acknowledged).toBe(result);
    expect(shown.at(-1)).toBeUndefined();
  });
});

describe('a run without a terminal', () => {
  it('has somebody to ask as long as there is a view, and says in the log what is asked', async () => {
    const { operator, answer, said, shown } = person({ isTTY: false });
    expect(operator.present).toBe(true);
    const given = operator.ask(unplug, never);
    await until(() => shown.length > 0);
    expect(said).toEqual(['\nAsked in the live view: To do: unplug\nUnplug K1.']);
    expect(answer('done')).toEqual({ kind: 'taken' });
    expect(await given).toBe('done');
    expect(said.at(-1)).toBe('Answered in the live view: done');
  });

  it('does not take the end of its input for an answer', async () => {
    const { operator, answer, shown, input } = person({ isTTY: false });
    input.end();
    const given = operator.acknowledge('mains', 'It is fed from the mains.', never);
    await until(() => shown.length > 0);
    answer('no');
    expect(await given).toBe('refused');
  });

  it('ends at once when it is to stop', async () => {
    const { operator, shown } = person({ isTTY: false });
    const stop = new AbortController();
    const given = operator.ask(unplug, stop.signal);
    await until(() => shown.length > 0);
    stop.abort(new StoppedByOperator('stopped in the live view'));
    await expect(given).rejects.toThrow('stopped in the live view');
    expect(shown.at(-1)).toBeUndefined();
  });
});

describe('a terminal that is closed at a question', () => {
  it('leaves it open in the view', async () => {
    const { operator, answer, asked, said, input, shown } = person();
    const given = operator.ask(unplug, never);
    await asked(/Press Enter/);
    input.end();
    await until(() => said.length > 0);
    expect(said).toEqual(['Nothing was answered here; the question is still open in the live view.']);
    expect(shown.at(-1)).toMatchObject({ text: 'Unplug K1.' });
    expect(answer('done')).toEqual({ kind: 'taken' });
    expect(await given).toBe('done');

    const next = operator.ask(warmth, never);
    await until(() => shown.at(-1)?.heading === 'To read: ambient');
    answer('19 degC');
    expect(await next).toBe('19 degC');
  });
});

describe('a wish to stop', () => {
  it('takes the question away from both places, with its reason', async () => {
    const { operator, asked, shown, answer } = person();
    const stop = new AbortController();
    const given = operator.ask(unplug, stop.signal);
    await asked(/Press Enter/);
    stop.abort(new StoppedByOperator('stopped with Ctrl-C'));
    await expect(given).rejects.toThrow('stopped with Ctrl-C');
    expect(shown.at(-1)).toBeUndefined();
    expect(answer('done')).toEqual({ kind: 'not-open' });
  });

  it('that came before asks nowhere', async () => {
    const { operator, shown, terminal } = person();
    const stopped = AbortSignal.abort(new StoppedByOperator('stopped with Ctrl-C'));
    await expect(operator.ask(unplug, stopped)).rejects.toThrow('stopped with Ctrl-C');
    expect([shown, terminal()]).toEqual([[], '']);
  });
});

it('--yes acknowledges without asking anywhere, and answers nothing else', async () => {
  const { operator, shown, asked, answer } = person({ yes: true });
  expect(await operator.acknowledge('mains', 'It is fed from the mains.', never)).toBe('--yes');
  expect(shown).toEqual([]);
  const given = operator.ask(unplug, never);
  await asked(/Press Enter/);
  answer('done');
  expect(await given).toBe('done');
});
