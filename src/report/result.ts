import type { Evidence } from '../analysis/evidence.js';
import type { Finding } from '../analysis/finding.js';
import type { Decision, Outcome } from '../judgement/judge.js';
import type { Integrity } from '../record/journal-check.js';
import type { RunHeader } from '../record/run-header.js';
import type { WatchmanReport } from '../record/watchman-report.js';

/** A record understood: everything that a report of it can say. */
export interface Result {
  readonly run: string;
  readonly header: RunHeader;
  readonly evidence: Evidence;
  readonly integrity: Integrity;
  readonly findings: readonly Finding[];
  readonly decisions: readonly Decision[];
  readonly outcome: Outcome | 'not-judged';
  readonly fingerprints: Fingerprints;
  /** Where the program vanished or hung. */
  readonly watchman?: WatchmanReport;
}

/** By which it can be told later whether a record is still the one that a report is of; SHA-256, in hex. */
export interface Fingerprints {
  /** Of run.json as it was read. */
  readonly header: string;
  /** The last seal that was believed: of every byte of the journal up to it. Undefined where there is none. */
  readonly lastSeal: string | undefined;
}

export type EndedHow = 'completed' | 'stopped' | 'failed' | 'cut-off';

/** How the run ended, by its journal. A journal that can't be believed to its end counts as cut off. */
export function endedHow({ evidence }: Result): { readonly how: EndedHow; readonly reason: string | null } {
  const { ended } = evidence;
  return ended === undefined ? { how: 'cut-off', reason: null } : { how: ended.how, reason: ended.reason };
}

/** Whether the run came to its end, and all of its record can be believed. */
export function isWhole(result: Result): boolean {
  return result.integrity.kind === 'whole' && endedHow(result).how === 'completed';
}
