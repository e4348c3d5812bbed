import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { choice, count, line, name, quantity, quantityOrShare } from '../../src/files/building-blocks.js';
import { checkValue } from '../../src/files/check-value.js';

const step = z.strictObject({
  for: quantity('time', 'How long.', { above: 0, most: 3600 }),
  dwell: quantity('time', 'Settling.').prefault('500 ms'),
  gap: quantity('time', 'Between.').default(0.25),
  to: quantityOrShare('current', 'How far.', { least: 0 }).exactOptional(),
  readings: count('How many.', { least: 1, most: 100 }).default(5),
});

it('defaults are values, whether given as text or as a number', () => {
  expect(checkValue(step, { for: '5 s' })).toEqual({
    kind: 'good',
    value: { for: 5, dwell: 0.5, gap: 0.25, readings: 5 },
  });
});

it('an editor is told the default as a file would write it', () => {
  const schema = z.toJSONSchema(step, { io: 'input' });
  expect(schema.properties?.['dwell']).toMatchObject({
    type: 'string',
    default: '500 ms',
    description: 'Settling.',
    examples: ['20 ms', '5 s', '1.5 min'],
  });
  expect(schema.required).toEqual(['for']);
});

describe('bounds', () => {
  it.each<[unknown, string]>([
    [{ for: '0 s' }, "found '0 s'; more than 0 s is needed"],
    [{ for: '2 h' }, "found '2 h'; at most 60 min is needed"],
    [{ for: '5 s', to: '-1 A' }, "found '-1 A'; at least 0 A is needed"],
    [{ for: '5 s', to: '-1 % of rated-current' }, "found '-1 % of rated-current'; at least 0 % is needed"],
    [{ for: '5 s', readings: 101 }, 'found the number 101; at most 100 is allowed'],
  ])('%j', (value, message) => {
    expect(checkValue(step, value)).toMatchObject({ kind: 'bad', complaints: [{ message }] });
  });
});

describe('what becomes the name of a folder', () => {
  const schema = name('A name.');
  it.each(['K1', 'real-limit', 'a.b_c-9', 'x'.repeat(64)])('%s will do', (text) => {
    expect(checkValue(schema, text).kind).toBe('good');
  });
  it.each(['', '.', '..', '.hidden', 'a/b', 'a\\b', 'a b', 'ä', 'a\n', 'x'.repeat(65), 'CON:'])(
    '%j will not',
    (text) => {
      expect(checkValue(schema, text).kind).toBe('bad');
    },
  );
});

it.each(['a\u0007b', 'a\nb', '\u001b[2J', '\u202etxt', '\u2028'])('free text may not hold %j', (text) => {
  expect(checkValue(line('Text.'), `x${text}x`).kind).toBe('bad');
});

it('a word that is not among the allowed ones is told the nearest, or all', () => {
  const way = choice(['up', 'up-and-down'], 'The way.');
  expect(checkValue(way, 'up-and-dwon')).toMatchObject({
    complaints: [{ message: "found 'up-and-dwon'; did you mean 'up-and-down'?" }],
  });
  expect(checkValue(way, 'sideways')).toMatchObject({
    complaints: [{ message: "found 'sideways'; one of up, up-and-down is needed" }],
  });
});
