import { PassThrough } from 'node:stream';
import { describe, expect, it } from 'vitest';
import { StoppedByOperator } from '../../src/run/stopped.js';
import { typedAs } from '../../src/quantity/typed-as.js';
import { TerminalOperator } from '../../src/run/terminal-operator.js';
import { parseQuantity } from '../../src/quantity/parse-quantity.js';
import type { Dimension } from '../../src/quantity/quantity.js';

/** A terminal with someone at it who types. */
function terminal(facts: { readonly yes?: boolean; readonly isTTY?: boolean; readonly keys?: 'raw' } = {}) {
  const input = Object.assign(new PassThrough(), { isTTY: facts.isTTY ?? true });
  const output = new PassThrough();
  // Only where the output is a terminal does the input give keys instead of lines.
  if (facts.keys === 'raw') Object.assign(output, { isTTY: true, columns: 100 });
  let text = '';
  output.on('data', (chunk: Buffer) => {
    text += chunk.toString();
  });
  const stop = new AbortController();
  const operator = new TerminalOperator({
    input,
    output,
    yes: facts.yes ?? false,
    interrupted: () => {
      stop.abort(new StoppedByOperator('stopped with Ctrl-C'));
    },
  });
  return { input, output, operator, shown: () => text, stop };
}

const never = new AbortController().signal;
const text = 'The module is fed from the mains.';

describe('a caution on a terminal', () => {
  it.each([
    ['yes', 'operator'],
    ['y', 'operator'],
    [' YES ', 'operator'],
    ['no', 'refused'],
    ['', 'refused'],
    ['yes please', 'refused'],
    ['ok', 'refused'],
  ])('answered with "%s" is taken as %s', async (answer, taken) => {
    const { input, operator, shown } = terminal();
    const asked = operator.acknowledge('hot-surfaces', text, never);
    input.write(`${answer}\n`);
    expect(await asked).toBe(taken);
    expect(shown()).toBe(
      `\nCaution, hot surfaces: ${text}\nUnderstood and taken care of? Type yes; anything else ends the run: `,
    );
  });

  it('is shown and not asked for where --yes was given', async () => {
    const { operator, shown } = terminal({ yes: true, isTTY: false });
    expect(await operator.acknowledge('mains', text, never)).toBe('--yes');
    expect(shown()).toBe(`\nCaution, mains: ${text}\nAcknowledged by --yes.\n`);
  });
});

describe('an act on a terminal', () => {
  it('is done when Enter is pressed', async () => {
    const { input, operator, shown } = terminal();
    const asked = operator.ask({ name: 'plug', text: 'Plug K1 in.', answer: 'done' }, never);
    input.write('\n');
    expect(await asked).toBe('done');
    expect(shown()).toBe('\nPlug K1 in.\nPress Enter when it is done; Ctrl-C stops the run. ');
  });

  it('is not done when something else is typed, and is asked for again', async () => {
    const { input, operator, shown } = terminal();
    const asked = operator.ask({ name: 'plug', text: 'Plug K1 in.', answer: 'done' }, never);
    input.write('wait\n');
    await expect.poll(shown).toContain('Not done, then.');
    input.write('done\n');
    expect(await asked).toBe('done');
  });

  it('that asks for an answer gets it without the spaces around it', async () => {
    const { input, operator, shown } = terminal();
    const asked = operator.ask({ name: 'air', text: 'How warm is it?', answer: 'temperature' }, never);
    input.write('  23 °C \n');
    expect(await asked).toBe('23 °C');
    expect(shown()).toBe(
      '\nHow warm is it?\nIn degrees Celsius, for example 23.5 degC; Ctrl-C stops the run.\n> ',
    );
  });

  it('is asked for in whole lines on a terminal that does not know its width', async () => {
    const { input, output, operator, shown } = terminal();
    Object.assign(output, { columns: 0 });
    const asked = operator.ask({ name: 'plug', text: 'Plug K1 in.', answer: 'done' }, never);
    input.write('\n');
    expect(await asked).toBe('done');
    expect(shown()).toContain('Plug K1 in.\nPress Enter when it is done;');
  });

  it('can be followed by another on the same terminal', async () => {
    const { input, operator } = terminal();
    for (const answer of ['one', 'two', 'three']) {
      const asked = operator.ask({ name: answer, text: answer, answer: 'text' }, never);
      input.write(`${answer}\n`);
      expect(await asked).toBe(answer);
    }
    expect(input.listenerCount('error')).toBe(0);
  });
});

describe('a question on a terminal never hangs', () => {
  const ask = (operator: TerminalOperator, signal = never): Promise<string> =>
    operator.ask({ name: 'plug', text: 'Plug K1 in.', answer: 'done' }, signal);
  const closed = {
    code: 'STOPPED_BY_OPERATOR',
    exitCode: 3,
    message: 'the terminal was closed at a question',
  };

  it('when the input ends', async () => {
    const { input, operator } = terminal();
    const asked = ask(operator);
    input.end();
    await expect(asked).rejects.toMatchObject(closed);
  });

  it('when the input had ended before it was asked', async () => {
    const { input, operator } = terminal();
    input.end();
    input.resume();
    await new Promise((resolve) => input.once('end', resolve));
    await expect(ask(operator)).rejects.toMatchObject(closed);
    await expect(operator.acknowledge('mains', text, never)).rejects.toMatchObject(closed);
  });

  it('when the terminal goes away with an error', async () => {
    const { input, operator } = terminal();
    const asked = ask(operator);
    input.destroy(Object.assign(new Error('read EIO'), { code: 'EIO' }));
    await expect(asked).rejects.toMatchObject(closed);
    await expect(ask(operator)).rejects.toMatchObject(closed);
  });

  it('when the run is stopped', async () => {
    const { operator } = terminal();
    const stop = new AbortController();
    const asked = ask(operator, stop.signal);
    const reason = new StoppedByOperator('stopped by a request to end (SIGTERM)');
    stop.abort(reason);
    await expect(asked).rejects.toBe(reason);
    await expect(ask(operator, stop.signal)).rejects.toBe(reason);
  });

  it('when Ctrl-C is pressed, which comes as a key there', async () => {
    const { input, operator, stop } = terminal({ keys: 'raw' });
    const asked = ask(operator, stop.signal);
    input.write('\u0003');
    await expect(asked).rejects.toMatchObject({
      code: 'STOPPED_BY_OPERATOR',
      message: 'stopped with Ctrl-C',
    });
  });

  it('when Ctrl-D is pressed on an empty line', async () => {
    const { input, operator } = terminal({ keys: 'raw' });
    const asked = ask(operator);
    input.write('\u0004');
    await expect(asked).rejects.toMatchObject(closed);
  });
});

describe('what was typed before a question', () => {
  /** A terminal that can give keys, as one of a person does. */
  function withKeys() {
    const at = terminal({ keys: 'raw' });
    const raw: boolean[] = [];
    Object.assign(at.input, { setRawMode: (on: boolean) => raw.push(on) });
    return { ...at, raw };
  }

  it('is no answer to it: neither an Enter nor the beginning of a word', async () => {
    const { input, operator, shown, raw } = withKeys();
    input.write('\ryes\rn');
    const asked = operator.ask({ name: 'plug', text: 'Pull the plug.', answer: 'text' }, never);
    await expect.poll(shown).toContain('> ');
    input.write('out\r');
    expect(await asked).toBe('out');
    expect(shown()).not.toContain('yes');
    expect(raw.at(-1)).toBe(false);
    expect(input.listenerCount('error')).toBe(0);
  });

  it('is no answer to it where another was answered before', async () => {
    const { input, operator, shown } = withKeys();
    const first = operator.ask({ name: 'lid', text: 'Close the lid.', answer: 'done' }, never);
    await expect.poll(shown).toContain('when it is done');
    input.write('\r');
    await first;
    input.write('\rn');
    const second = operator.ask({ name: 'plug', text: 'Pull the plug.', answer: 'text' }, never);
    await expect.poll(shown).toContain('> ');
    input.write('out\r');
    expect(await second).toBe('out');
  });

  it('is no answer to it where it is asked again', async () => {
    const { input, operator, shown } = withKeys();
    const asked = operator.ask({ name: 'plug', text: 'Pull the plug.', answer: 'done' }, never);
    await expect.poll(shown).toContain('when it is done');
    input.write('wait\r');
    input.write('\r');
    await expect.poll(shown).toContain('Press Enter when it is;');
    input.write('out\r');
    await expect.poll(() => shown().split('Not done, then.').length).toBe(3);
    input.write('\r');
    expect(await asked).toBe('done');
  });

  it('still stops the run where it was Ctrl-C, and then nothing is asked', async () => {
    const { input, operator, shown, stop, raw } = withKeys();
    input.write('\r\u0003');
    const asked = operator.ask({ name: 'plug', text: 'Pull the plug.', answer: 'done' }, stop.signal);
    await expect(asked).rejects.toMatchObject({ message: 'stopped with Ctrl-C' });
    expect(shown()).not.toContain('Press Enter');
    expect(raw).toEqual([true, false]);
  });

  it('leaves a terminal that goes away meanwhile to be found out', async () => {
    const { input, operator } = withKeys();
    const asked = operator.ask({ name: 'plug', text: 'Pull the plug.', answer: 'done' }, never);
    input.destroy(Object.assign(new Error('read EIO'), { code: 'EIO' }));
    await expect(asked).rejects.toMatchObject({ message: 'the terminal was closed at a question' });
  });
});

describe('a question that is answered elsewhere', () => {
  it('is taken away with its line ended, and what was typed of an answer is not taken for the next', async () => {
    const { input, operator, shown } = terminal({ keys: 'raw' });
    const elsewhere = new AbortController();
    const first = operator.ask(
      { name: 'air', text: 'How warm is it?', answer: 'temperature' },
      elsewhere.signal,
    );
    input.write('21 de');
    await expect.poll(shown).toContain('21 de');
    elsewhere.abort(new Error('answered elsewhere'));
    await expect(first).rejects.toThrow('answered elsewhere');
    expect(shown()).toMatch(/> .*21 de\r\n$/s);
    const second = operator.ask({ name: 'plug', text: 'What is on its plug?', answer: 'text' }, never);
    input.write('a ring\r');
    expect(await second).toBe('a ring');
  });

  it('is not shown at all where it was answered before', async () => {
    const { operator, shown } = terminal();
    const signal = AbortSignal.abort(new Error('answered elsewhere'));
    await expect(operator.typesYes('Switch it on? ', signal)).rejects.toThrow('answered elsewhere');
    expect(shown()).toBe('');
  });

  it('is taken away from a pipe in the same way', async () => {
    const { operator, shown } = terminal();
    const elsewhere = new AbortController();
    const asked = operator.typesYes('Switch it on? ', elsewhere.signal);
    elsewhere.abort(new Error('answered elsewhere'));
    await expect(asked).rejects.toThrow('answered elsewhere');
    expect(shown()).toBe('Switch it on? \r\n');
  });
});

describe('what is to be wired', () => {
  it('is a numbered list, that hangs within the window', async () => {
    const { input, output, operator, shown } = terminal();
    Object.assign(output, { columns: 40 });
    const asked = operator.acknowledge(
      'wiring',
      'Module unplugged, and its output at the load.\nPlug it in.',
      never,
    );
    input.write('yes\n');
    expect(await asked).toBe('operator');
    expect(shown()).toBe(
      [
        '',
        'Wiring, with nothing switched on yet:',
        '  1. Module unplugged, and its output at',
        '     the load.',
        '  2. Plug it in.',
        'Is it wired so? Type yes; anything else',
        'ends the run: ',
      ].join('\n'),
    );
  });

  it('is no list where it is one thing', async () => {
    const { operator, shown } = terminal({ yes: true });
    await operator.acknowledge('wiring', 'Plug it in.', never);
    expect(shown()).toContain(':\n  Plug it in.\n');
  });
});

describe('the example of an answer', () => {
  it.each(Object.entries(typedAs))('of %s is taken as it stands: %s', (dimension, words) => {
    const example = /for example (.+)$/.exec(words)?.[1] ?? '';
    expect(parseQuantity(example, dimension as Dimension)).toBeGreaterThan(0);
  });
});

describe('someone is there', () => {
  it('only where the input is a terminal', () => {
    expect(terminal().operator.present).toBe(true);
    expect(terminal({ isTTY: false }).operator.present).toBe(false);
    const [input, output] = [new PassThrough(), new PassThrough()];
    const piped = new TerminalOperator({ input, output, yes: true, interrupted: () => undefined });
    expect(piped.present).toBe(false);
  });
});
