import { expect, it } from 'vitest';
import { cautionTexts } from '../../src/record/caution-texts.js';
import { cautions } from '../../src/files/procedure.js';
import { OperatorAbsentError } from '../../src/run/stopped.js';

it('a procedure that needs someone says for which steps, and that --yes is not enough', () => {
  expect(new OperatorAbsentError(['step 2 (operator)', 'its cautions'])).toMatchObject({
    exitCode: 64,
    message:
      'the procedure needs someone at the bench for step 2 (operator) and its cautions, and there is no terminal',
    advice:
      'run it in a terminal, or with --view, which serves a page to answer on; --yes acknowledges wiring and cautions only',
  });
});

it('every caution that a procedure can name has a text, in whole sentences', () => {
  for (const name of cautions) expect(cautionTexts[name]).toMatch(/^[A-Z].*\.$/);
});
