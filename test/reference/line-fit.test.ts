import { describe, expect, it } from 'vitest';

import thermometer from '../../fixtures/reference/gum-h3.json' with { type: 'json' };
import norris from '../../fixtures/reference/nist-strd-norris.json' with { type: 'json' };
import { fitLine, predictLine } from '../../src/statistics/line-fit.js';
import { relativeError } from '../statistics/relative-error.js';

// Source: JCGM 100:2008, H.3, calibration of a thermometer, Table H.6 (values kept in the fixture,
// with how each was obtained).
describe('the straight line against JCGM 100:2008, H.3', () => {
  const fit = fitLine(
    thermometer.t_C.map((t) => t - thermometer.t0_C),
    thermometer.b_C,
  );
  const at30 = predictLine(fit, 30 - thermometer.t0_C);
  const found = {
    intercept: fit.intercept,
    u_intercept: fit.interceptUncertainty,
    slope: fit.slope,
    u_slope: fit.slopeUncertainty,
    correlation: fit.correlation,
    residual_sd: fit.residualDeviation,
    prediction_30C: at30.value,
    u_prediction_30C: at30.uncertainty,
  };

  it.each([
    ['intercept', 4],
    ['u_intercept', 4],
    ['slope', 5],
    ['u_slope', 5],
    ['correlation', 2],
    ['residual_sd', 4],
    ['prediction_30C', 4],
    ['u_prediction_30C', 4],
  ] as const)('%s rounds to what is printed', (name, decimals) => {
    expect(found[name].toFixed(decimals)).toBe(thermometer.published[name].toFixed(decimals));
  });

  // Source: the same data recomputed in R, as the fixture says.
  it.each(Object.keys(found) as (keyof typeof found)[])('%s agrees with R to nine digits', (name) => {
    expect(relativeError(found[name], thermometer.recomputed[name])).toBeLessThan(1e-9);
  });

  it('covariance, sum of squares and degrees of freedom agree with R', () => {
    expect(relativeError(fit.covariance, thermometer.recomputed.covariance)).toBeLessThan(1e-9);
    expect(relativeError(fit.sumOfSquares, thermometer.recomputed.sum_sq_residuals)).toBeLessThan(1e-9);
    expect(fit.degreesOfFreedom).toBe(thermometer.recomputed.dof);
  });
});

// Source: NIST Statistical Reference Datasets, linear regression, Norris: certified values.
describe("the straight line against NIST's Norris data", () => {
  const fit = fitLine(norris.x, norris.y);
  const [intercept, slope] = norris.certified.coefficients;
  const [interceptUncertainty, slopeUncertainty] = norris.certified.sd;

  it.each([
    ['intercept', fit.intercept, intercept],
    ['slope', fit.slope, slope],
    ['interceptUncertainty', fit.interceptUncertainty, interceptUncertainty],
    ['slopeUncertainty', fit.slopeUncertainty, slopeUncertainty],
    ['residualDeviation', fit.residualDeviation, norris.certified.residual_sd],
    ['sumOfSquares', fit.sumOfSquares, norris.certified.rss],
    ['degreesOfFreedom', fit.degreesOfFreedom, norris.certified.dof],
  ])('%s has at least eleven certified digits', (_, found, certified) => {
    expect(relativeError(found, certified ?? NaN)).toBeLessThan(1e-11);
  });
});
