import { describe, expect, it } from 'vitest';
import { errorText } from '../../src/cli/error-text.js';
import { exitCodes, RailproofError } from '../../src/errors/railproof-error.js';

class Example extends RailproofError {
  readonly code = 'EXAMPLE';
  readonly exitCode = exitCodes.usage;
}

describe('an error as it is shown', () => {
  it.each([
    ['the load is silent', 'is it on?', 'the load is silent. Is it on?'],
    ["did you mean 'real-limit'?", 'a path will do', "did you mean 'real-limit'? A path will do."],
    ['it stopped.', 'Look at the leads.', 'it stopped. Look at the leads.'],
    ['one: bad\ntwo: bad', 'nothing was switched on', 'one: bad\ntwo: bad\nNothing was switched on.'],
  ])('%j with the advice %j', (message, advice, text) => {
    expect(errorText(new Example(message, { advice }))).toBe(text);
  });

  it('never lets an instrument steer the terminal', () => {
    expect(errorText(new Example('it answered \u001b[2J\u0007'))).toBe('it answered \\u001b[2J\\u0007');
  });

  it('calls what was not foreseen a fault of ours, with its trace', () => {
    const text = errorText(new TypeError('x is undefined'));
    expect(text).toMatch(/^railproof: a fault of ours, please report it: TypeError: x is undefined\n {4}at /);
  });
});
