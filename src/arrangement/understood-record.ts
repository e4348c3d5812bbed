import type { Finding } from '../analysis/finding.js';
import type { RunHeader } from '../record/run-header.js';

/** A record with what it shows, as far as building on it needs to know. */
export interface UnderstoodRecord {
  /** The name of its folder. */
  readonly run: string;
  readonly header: RunHeader;
  readonly findings: readonly Finding[];
  readonly state: RecordState;
  /** Its procedure's criteria that it does not conform to. */
  readonly unmet: readonly { readonly finding: string; readonly requirement: string }[];
}

/**
 * `stopped`: by a guard, the operator or a failure. `cut-off`: its journal ends without an end. `damaged`: a
 * seal does not hold, and nothing is believed of it.
 */
export type RecordState = 'whole' | 'stopped' | 'cut-off' | 'damaged';

/** Where a number came from. */
export interface RecordSource {
  readonly run: string;
  readonly procedure: string;
  /** ISO 8601, UTC. */
  readonly began: string;
  readonly state: Exclude<RecordState, 'damaged'>;
  readonly simulated: boolean;
}
