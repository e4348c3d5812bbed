import { describe, expect, it } from 'vitest';

import pines from '../../fixtures/reference/asymptotic-growth.json' with { type: 'json' };
import computed from '../../fixtures/reference/settling.json' with { type: 'json' };
import { fitSettling, type SettlingFit } from '../../src/statistics/settling-fit.js';
import { settledInterval } from '../../src/statistics/settling-interval.js';
import { relativeError } from '../statistics/relative-error.js';

function settlingOf(t: readonly number[], y: readonly number[]): SettlingFit {
  const outcome = fitSettling(t, y);
  if (outcome.kind !== 'settling') throw new Error(`no settling: ${outcome.kind}`);
  return outcome;
}

// Source: R, nls with SSasymp on the data set Loblolly, seed 329 (from memory, as the fixture says).
describe("the settling curve against R's asymptotic regression", () => {
  const fit = settlingOf(pines.age_yr, pines.height_ft);
  const { published } = pines;

  it.each([
    ['asymptote', fit.settled, published.Asym],
    ['its standard error', fit.settledUncertainty, published.Asym_st_err],
    ['value at age 0', fit.start, published.R0],
    ['its standard error', fit.startUncertainty, published.R0_st_err],
    ['logarithm of the rate', -Math.log(fit.timeConstant), published.lrc],
    ['its standard error', fit.timeConstantUncertainty / fit.timeConstant, published.lrc_st_err],
    ['residual deviation', fit.residualDeviation, published.residual_sd],
  ])('%s rounds to what is printed', (_, found, printed) => {
    expect(found.toFixed(4)).toBe(printed.toFixed(4));
  });

  it('has the degrees of freedom that are printed', () => {
    expect(fit.degreesOfFreedom).toBe(published.dof);
  });
});

// Source: mpmath, 50 digits, by another method (full Newton on the normal equations; the interval by a
// root search with the other parameters solved at each value), as the fixture says. NIST StRD has no
// data set with this model; its Misra1a and BoxBOD hold the start at 0.
describe.each(computed.cases)('the settling curve against 50 digits: $name', (reference) => {
  const fit = settlingOf(reference.t, reference.y);

  it.each([
    'settled',
    'settledUncertainty',
    'start',
    'startUncertainty',
    'timeConstant',
    'timeConstantUncertainty',
    'sumOfSquares',
    'residualDeviation',
    'degreesOfFreedom',
  ] as const)('%s is that of the exact optimum to 1e-12', (name) => {
    expect(relativeError(fit[name], reference[name])).toBeLessThan(1e-12);
  });

  it('covariance agrees in all nine places', () => {
    for (const [row, of] of reference.covariance.entries()) {
      for (const [column, expected] of of.entries()) {
        expect(relativeError(fit.covariance[row]?.[column] ?? NaN, expected)).toBeLessThan(1e-11);
      }
    }
  });

  it('both ends of the profile interval agree to 1e-12', () => {
    const found = settledInterval(reference.t, reference.y, fit);
    for (const [index, end] of reference.settledInterval95.entries()) {
      expect(relativeError(found[index] ?? NaN, end)).toBeLessThan(1e-12);
    }
  });
});
