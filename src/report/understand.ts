import { analyse } from '../analysis/analyse.js';
import { type Evidence, EvidenceCollector } from '../analysis/evidence.js';
import { type Decision, judge, overall } from '../judgement/judge.js';
import { checkJournal, type Integrity, otherHeader } from '../record/journal-check.js';
import { readJournal } from '../record/journal-reader.js';
import { sealOf } from '../record/journal-line.js';
import { readWatchmanReport } from '../record/read-watchman-report.js';
import { runFolderAt } from '../record/run-folder.js';
import { readHeader } from '../record/run-header.js';
import type { Result } from './result.js';

/**
 * Reads a record and works out everything that it shows: findings and decisions. The same record gives
 * the same result each time; a record that was cut off or damaged gives what is whole.
 * @throws NoRecordError, BadRecordError
 */
export function understand(path: string): Result {
  const folder = runFolderAt(path);
  const { header, sha256 } = readHeader(path);
  const collector = new EvidenceCollector(header);
  let begunWith = sha256;
  let lastSeal: string | undefined;
  const journal = readJournal(folder.journal, checkJournal(folder.journal), (event) => {
    if (event.event === 'opened') begunWith = event.header;
    lastSeal = sealOf(event) ?? lastSeal;
    collector.add(event);
  });
  const integrity = begunWith === sha256 ? journal : changedHeader(journal);
  const evidence = collector.result();
  const findings = analyse(evidence);
  const decisions = judge(header, findings);
  const watchman = readWatchmanReport(folder);
  return {
    run: folder.name,
    header,
    evidence,
    integrity,
    findings,
    decisions,
    outcome: outcomeOf(integrity, evidence, decisions),
    fingerprints: { header: sha256, lastSeal },
    ...(watchman === undefined ? {} : { watchman }),
  };
}

/** What was planned, on what and with what, decides what the readings mean: nothing of it may be changed. */
function changedHeader({ lines, bytes }: Integrity): Integrity {
  return { kind: 'damaged', lines, bytes, line: 1, problem: otherHeader };
}

/**
 * Nobody knows what the missing part of a record, or of a run that was stopped, would have shown, so it can't
 * say that a module conforms.
 */
function outcomeOf(
  integrity: Integrity,
  { ended }: Evidence,
  decisions: readonly Decision[],
): Result['outcome'] {
  const outcome = overall(decisions);
  const whole = integrity.kind === 'whole' && ended?.how === 'completed';
  return !whole && outcome === 'conforms' ? 'undecided' : outcome;
}
