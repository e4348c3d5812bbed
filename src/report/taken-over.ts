import type { Evidence } from '../analysis/evidence.js';

/** Steps that were measured in an earlier run. */
export interface TakenOverPart {
  /** The name of that record's folder. */
  readonly run: string;
  /** ISO 8601, UTC: when that run began. */
  readonly began: string;
  readonly first: number;
  readonly last: number;
}

/** Which steps come from which run, where a run was resumed, and that one too perhaps. */
export function takenOver({ resumed }: Pick<Evidence, 'resumed'>): readonly TakenOverPart[] {
  return resumed.flatMap(({ run, began, steps }, index) => {
    const first = (resumed[index - 1]?.steps ?? 0) + 1;
    return steps < first ? [] : [{ run, began, first, last: steps }];
  });
}
