import { describe, expect, it } from 'vitest';

import noIntercept from '../../fixtures/reference/nist-strd-noint1.json' with { type: 'json' };
import norris from '../../fixtures/reference/nist-strd-norris.json' with { type: 'json' };
import { LinearCombination, type LinearCombinationFit } from '../../src/statistics/linear-combination.js';
import { relativeError } from '../statistics/relative-error.js';

interface DataSet {
  readonly x: readonly number[];
  readonly y: readonly number[];
}

function fitOf({ x, y }: DataSet, rowOf: (x: number) => readonly number[]): LinearCombinationFit {
  const combination = new LinearCombination(rowOf(0).length);
  for (const [index, of] of x.entries()) combination.add(rowOf(of), y[index] ?? NaN);
  const outcome = combination.solve();
  if (outcome.kind !== 'determined') throw new Error(outcome.why);
  return outcome;
}

// Sources: NIST Statistical Reference Datasets, linear regression, certified values: NoInt1 (one unknown,
// no intercept), and Norris with a column of ones as the second unknown.
describe.each([
  { name: 'NoInt1', data: noIntercept, fit: fitOf(noIntercept, (x) => [x]) },
  { name: 'Norris', data: norris, fit: fitOf(norris, (x) => [1, x]) },
])("the linear combination against NIST's $name data", ({ data: { certified }, fit }) => {
  it.each([
    ['coefficients', fit.coefficients, certified.coefficients],
    ['uncertainties', fit.uncertainties, certified.sd],
    ['residualDeviation', [fit.residualDeviation], [certified.residual_sd]],
    ['sumOfSquares', [fit.sumOfSquares], [certified.rss]],
    ['degreesOfFreedom', [fit.degreesOfFreedom], [certified.dof]],
  ])('%s has at least eleven certified digits', (_, found, expected) => {
    expect(found).toHaveLength(expected.length);
    for (const [index, value] of expected.entries()) {
      expect(relativeError(found[index] ?? NaN, value)).toBeLessThan(1e-11);
    }
  });
});
