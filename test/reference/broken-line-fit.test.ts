import { describe, expect, it } from 'vitest';

import segmented from '../../fixtures/reference/segmented.json' with { type: 'json' };
import { fitBrokenLine } from '../../src/statistics/broken-line-fit.js';
import { relativeError } from '../statistics/relative-error.js';

// Sources: R package segmented 1.6.2 (its data set stagnant: Bacon & Watts 1971; three synthetic supply
// curves), and an independent scan with exact least squares in every gap. R stops about 1e-8 short.
describe.each(segmented.cases)("the broken line against R's segmented: $name", (reference) => {
  const fit = fitBrokenLine(reference.x, reference.y);
  const { exact_optimum: exact } = reference;

  it.each([
    ['breakpoint', fit?.breakpoint, exact.breakpoint],
    ['its standard error', fit?.breakpointUncertainty, exact.breakpoint_st_err],
    ['left slope', fit?.left.slope, exact.slope1],
    ['its standard error', fit?.left.slopeUncertainty, exact.slope1_st_err],
    ['right slope', fit?.right.slope, exact.slope2],
    ['its standard error', fit?.right.slopeUncertainty, exact.slope2_st_err],
    ['left intercept', fit?.left.intercept, exact.intercept1],
    ['residual sum of squares', fit?.sumOfSquares, exact.rss],
    ['residual deviation', fit?.residualDeviation, exact.residual_sd],
  ])('%s agrees with the exact optimum to 1e-9', (_, found, expected) => {
    expect(relativeError(found ?? NaN, expected)).toBeLessThan(1e-9);
  });

  it.each([
    ['breakpoint', fit?.breakpoint, reference.breakpoint.estimate],
    ['its standard error', fit?.breakpointUncertainty, reference.breakpoint.st_err],
    ['left slope', fit?.left.slope, reference.slope1.estimate],
    ['its standard error', fit?.left.slopeUncertainty, reference.slope1.st_err],
    ['right slope', fit?.right.slope, reference.slope2.estimate],
    ['its standard error', fit?.right.slopeUncertainty, reference.slope2.st_err],
    ['left intercept', fit?.left.intercept, reference.intercept1],
    ['right intercept', fit?.right.intercept, reference.intercept2],
    ['residual sum of squares', fit?.sumOfSquares, reference.rss],
    ['residual deviation', fit?.residualDeviation, reference.residual_sd],
    ['degrees of freedom', fit?.degreesOfFreedom, reference.residual_dof],
  ])('%s agrees with R to 1e-6', (_, found, expected) => {
    expect(relativeError(found ?? NaN, expected)).toBeLessThan(1e-6);
  });

  it('finds the break significant', () => {
    expect(fit?.improvementOverLine.p).toBeLessThan(1e-15);
  });
});
