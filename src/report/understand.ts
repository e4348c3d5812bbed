import { analyse } from '../analysis/analyse.js';
import { EvidenceCollector } from '../analysis/evidence.js';
import { type Decision, judge, overall } from '../judgement/judge.js';
import { checkJournal, type Integrity, readJournal } from '../record/journal-reader.js';
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
  const header = readHeader(path);
  const collector = new EvidenceCollector(header);
  const integrity = readJournal(folder.journal, checkJournal(folder.journal), (event) => {
    collector.add(event);
  });
  const evidence = collector.result();
  const findings = analyse(evidence);
  const decisions = judge(header, findings);
  return {
    run: folder.name,
    header,
    evidence,
    integrity,
    findings,
    decisions,
    outcome: outcomeOf(integrity, decisions),
  };
}

/** Nobody knows what the missing part of a record would have shown, so it can't say that a module conforms. */
function outcomeOf(integrity: Integrity, decisions: readonly Decision[]): Result['outcome'] {
  const outcome = overall(decisions);
  return integrity.kind !== 'whole' && outcome === 'conforms' ? 'undecided' : outcome;
}
