import { answerFindings } from './answers.js';
import { curveSeen } from './curve-seen.js';
import type { Evidence } from './evidence.js';
import { type Finding, findingNamed, numberNamed } from './finding.js';
import { isolationFindings } from './isolation.js';
import { leadFindings } from './lead-resistance.js';
import { limitStyleFindings } from './limit-style.js';
import { onsetFindings } from './onset.js';
import { recommendedFindings } from './recommended-current.js';
import { recoveryFindings } from './recovery.js';
import { sharingFindings } from './sharing.js';
import { shortCircuitFindings } from './short-circuit.js';
import { soakedOf, soakFindings } from './soak.js';
import { stackFindings } from './stack.js';
import { usableCurrent } from './usable-current.js';
import { warmDropout } from './warm-dropout.js';

/**
 * Everything that a record's evidence shows, in the order in which a reader wants it. Pure: the same
 * record gives the same findings, whoever made it and whenever. What was not measured is not there.
 */
export function analyse(evidence: Evidence): readonly Finding[] {
  const { held, cold, knee, trace, openCircuit, droop, findings } = curveSeen(evidence);
  const { idle, unsteady, regulation, dropout } = findings;
  const style = limitStyleFindings(evidence, {
    dropout: numberNamed(dropout, 'dropout-current'),
    openCircuit,
    droop,
    trace,
  });
  const soaked = soakedOf(evidence);
  const usable = usableCurrent(evidence, {
    dropout: dropout[0],
    unsteady: unsteady[0],
    held,
    soaked,
    warm: warmDropout(evidence),
  });
  const sharing = sharingFindings(evidence, {
    dropout: dropout[0],
    held,
    style: wordNamed('limit-style', style),
  });
  return [
    ...(usable === undefined ? [] : [usable.finding]),
    ...recommendedFindings(evidence, usable, soaked, sharing.ownLabels),
    ...sharing.findings,
    ...stackFindings(evidence, { dropout: dropout[0], held, openCircuit: idle[0] }),
    ...idle,
    ...regulation,
    ...onsetFindings(evidence, cold, knee),
    ...unsteady,
    ...dropout,
    ...style,
    ...shortCircuitFindings(evidence, trace),
    ...recoveryFindings(evidence),
    ...soakFindings(evidence),
    ...leadFindings(evidence),
    ...isolationFindings(evidence),
    ...answerFindings(evidence),
  ];
}

function wordNamed(name: string, findings: readonly Finding[]): string | undefined {
  const value = findingNamed(findings, name)?.value;
  return typeof value === 'string' ? value : undefined;
}
