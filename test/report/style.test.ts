import { describe, expect, it } from 'vitest';
import { plainStyle, styleFor, terminalStyle } from '../../src/report/style.js';

describe('the style of a stream', () => {
  it.each([
    [{ isTTY: true }, {}, 'coloured', terminalStyle],
    [{ isTTY: true }, { NO_COLOR: '' }, 'coloured', terminalStyle],
    [{ isTTY: true }, { NO_COLOR: '1' }, 'plain', plainStyle],
    [{ isTTY: false }, {}, 'plain', plainStyle],
    [{}, {}, 'plain', plainStyle],
  ])('%j with %j is %s', (stream, environment, _, style) => {
    expect(styleFor(stream, environment)).toBe(style);
  });

  it('never takes or adds a word', () => {
    expect(plainStyle.strong('a') + plainStyle.warn('b') + plainStyle.faint('c')).toBe('abc');
  });
});
