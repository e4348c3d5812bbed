import type { ParallelBuild } from '../../arrangement/parallel-build.js';
import type { Selection } from '../../arrangement/selection.js';
import type { SeriesBuild } from '../../arrangement/series-build.js';
import type { StagedBuild } from '../../arrangement/staged-build.js';

/** Whatever can be worked out of records to be built. */
export type AnyBuild = ParallelBuild | SeriesBuild | StagedBuild | Selection;

export type BuildOutcome =
  | 'may-be-built'
  /** It might be built, and is recommended for less than the load asked for. */
  | 'too-little'
  | 'must-not-be-built'
  | 'cannot-tell';

/** What it all comes to; never that it may be built where anything speaks against it. */
export function outcomeOf(build: AnyBuild): BuildOutcome {
  const { kind } = build.standing;
  return kind === 'may-be-built' && !bearsItsLoad(build) ? 'too-little' : kind;
}

/** A load that nobody asked for is the recommended one. */
function bearsItsLoad(build: AnyBuild): boolean {
  if (build.kind !== 'parallel' && build.kind !== 'series') return true;
  const { load, recommended } = build;
  return load.from === 'recommended' || load.current <= recommended.current * (1 + 1e-9);
}
