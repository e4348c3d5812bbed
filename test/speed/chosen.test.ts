import { expect, it } from 'vitest';
import { chosenFrom } from './chosen.js';

const all = ['broken-line', 'starting'];

it('measures everything, or what was asked for alone', () => {
  expect(chosenFrom(all, undefined)).toEqual({ kind: 'names', names: all });
  expect(chosenFrom(all, 'starting')).toEqual({ kind: 'names', names: ['starting'] });
});

it('says which there are, where there is none of that name', () => {
  expect(chosenFrom(all, 'statring')).toEqual({
    kind: 'unknown',
    message: "no benchmark is called 'statring'; there are broken-line, starting",
  });
});
