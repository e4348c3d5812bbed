import { buildParallel } from '../../../src/arrangement/build-parallel.js';
import { buildSeries } from '../../../src/arrangement/build-series.js';
import { buildStages } from '../../../src/arrangement/build-stages.js';
import type { ParallelBuild, ParallelWish } from '../../../src/arrangement/parallel-build.js';
import { selectModules } from '../../../src/arrangement/select-modules.js';
import type { Selection, SelectionWish } from '../../../src/arrangement/selection.js';
import type { SeriesBuild } from '../../../src/arrangement/series-build.js';
import type { StagedBuild } from '../../../src/arrangement/staged-build.js';
import { madeProfile } from '../../arrangement/made-profile.js';
import { bricks as twelveVolt, valveBench } from '../../arrangement/staged.js';

/** Three 15 V bricks of the nursery, and one whose output is tied to earth. */
export const bricks = {
  K1: madeProfile('K1'),
  K2: madeProfile('K2', { openCircuit: 15.15, droop: 0.019, dropout: 5.2, usable: 5.0 }),
  K3: madeProfile('K3', { openCircuit: 15.1, droop: 0.017, dropout: 5.4, style: 'constant-current' }),
  bonded: madeProfile('K9', { earth: 'bonded' }),
  unproved: madeProfile('K8', { earth: undefined, outputIsolation: 'unknown' }),
} as const;

export function pair(wish: Partial<ParallelWish> = {}): ParallelBuild {
  return buildParallel([bricks.K1, bricks.K2], {
    ballast: { kind: 'given', resistance: 0.051 },
    tolerance: 0.05,
    load: undefined,
    ...wish,
  });
}

/** No resistor of ± 5 % does it. */
export function pairThatNothingHelps(): ParallelBuild {
  return pair({ ballast: { kind: 'for-imbalance', most: 0.05 } });
}

export function string(load?: number): SeriesBuild {
  return buildSeries([bricks.K1, bricks.K2, bricks.K3], { load });
}

export function stringWithBonded(): SeriesBuild {
  return buildSeries([bricks.K1, bricks.bonded], { load: undefined });
}

export function stringUnproved(): SeriesBuild {
  return buildSeries([bricks.K1, bricks.unproved], { load: undefined });
}

export function chosen(wish: Partial<SelectionWish> = {}): Selection {
  const { K1, K2, K3, bonded } = bricks;
  const unfit = [{ module: 'K7', why: 'its record is damaged', advice: 'measure it again' }];
  return selectModules(
    { profiles: [K1, K2, K3, bonded], unfit },
    {
      ...{ group: 2, stack: 1, supplies: 1, tolerance: 0.01 },
      ballast: { kind: 'for-imbalance', most: 0.1 },
      ...wish,
    },
  );
}

export function staged(): StagedBuild {
  return buildStages(twelveVolt(), valveBench());
}

/** Its contacts bridge, so that both sides are joined for a moment. */
export function stagedThatShorts(): StagedBuild {
  const { contacts } = valveBench();
  const bridging = contacts.map((contact) =>
    contact.kind === 'change-over' ? { ...contact, bridges: true } : contact,
  );
  return buildStages(twelveVolt(), valveBench({ contacts: bridging }));
}
