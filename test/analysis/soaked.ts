import type { Soaked } from '../../src/analysis/derating.js';
import { measured } from '../../src/analysis/finding.js';
import type { RunHeader } from '../../src/record/run-header.js';
import { headerOf } from './evidence-of.js';

/** A soak at 4 A that settled 40 K over 23 °C, within a limit of 85 °C, unless told otherwise. */
export function soakedOf({
  rise = 40,
  uncertainty = 0,
  ...rest
}: Partial<Omit<Soaked, 'rise'>> & { rise?: number; uncertainty?: number } = {}): Soaked {
  const budget = [{ name: 'all', kind: 'B', uncertainty, degreesOfFreedom: Infinity }] as const;
  return {
    current: 4,
    rise: measured('temperature-rise', 'temperature-difference', rise, budget, { step: 2 }),
    settled: true,
    ambient: 23,
    limit: 85,
    ...rest,
  };
}

/** A header whose derating says this besides a margin of 80 %. */
export function deratedBy(
  derating: Partial<RunHeader['derating']>,
  rest: Partial<Pick<RunHeader, 'circuit' | 'modules'>> = {},
): RunHeader {
  const header = headerOf();
  return { ...header, ...rest, derating: { ...header.derating, ...derating } };
}
