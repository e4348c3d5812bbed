import { givenPercent, ratedAmperes } from '../analysis/in-words.js';
import { formatExact, formatQuantity } from '../quantity/format-quantity.js';
import type { Part } from './build.js';
import { moduleParts } from './module-parts.js';
import type { ModuleProfile } from './module-profile.js';
import { orDiodeDrop, orDiodeFor } from './or-diode.js';
import type { ParallelBuild } from './parallel-build.js';

/**
 * What is bought for a group: its modules, a ballast for each, and the diodes that it may do without; numbered on
 * after so many modules of others.
 */
export function parallelParts(
  profiles: readonly ModuleProfile[],
  ballast: ParallelBuild['ballast'],
  after = 0,
): readonly Part[] {
  return [...moduleParts(profiles), ...ballastParts(profiles, ballast, after), orDiodeParts(profiles, after)];
}

/** A ballast for each, none where none is needed. */
export function ballastParts(
  profiles: readonly ModuleProfile[],
  ballast: ParallelBuild['ballast'],
  after = 0,
): readonly Part[] {
  if (ballast.kind !== 'resistor') return [];
  const { resistance, tolerance, rating, dissipation, dissipationAtLimit } = ballast;
  const watts = (power: number): string => formatQuantity(power, 'power', { significant: 2 });
  const value = formatExact(resistance, 'resistance');
  return [
    {
      marks: profiles.map((_, index) => `R${after + index + 1}`),
      what: 'ballast resistor in the plus lead of each module',
      ratings: [
        `${value.value} ${value.unit}`,
        `± ${givenPercent(tolerance)}`,
        rating === undefined
          ? `${watts(2 * dissipation)} at least, of several`
          : `at least ${formatQuantity(rating, 'power')}`,
      ],
      why: `makes the modules share: up to ${watts(dissipation)} of heat in use, of which the rating is twice that at least, and ${watts(dissipationAtLimit)} with its module at its limit`,
    },
  ];
}

function orDiodeParts(profiles: readonly ModuleProfile[], after: number): Part {
  const { rating, heat } = orDiodeFor(profiles);
  const voltage = formatExact(rating.voltage, 'voltage');
  return {
    marks: profiles.map((_, index) => `D${after + index + 1}`),
    what: 'optional: OR-ing diode (Schottky) in the plus lead of each module',
    ratings: [`at least ${ratedAmperes(rating.current)}`, `${voltage.value} ${voltage.unit} reverse`],
    why: `only where the group must go on when an output fails shorted: costs about ${formatQuantity(orDiodeDrop, 'voltage')} of the bus, and makes up to ${formatQuantity(heat, 'power', { significant: 2 })} of heat on a heat sink`,
  };
}
