import { answerFindings } from './answers.js';
import { coldPoints, heldPoints, stepsOf } from './curve.js';
import { dropoutBracket, dropoutFindings } from './dropout.js';
import type { Evidence } from './evidence.js';
import { type Finding, findingNamed } from './finding.js';
import { isolationFindings } from './isolation.js';
import { leadFindings } from './lead-resistance.js';
import { limitStyleFindings } from './limit-style.js';
import { limitTraceOf } from './limit-trace.js';
import { findKnee, onsetFindings } from './onset.js';
import { openCircuitFindings } from './open-circuit.js';
import { recommendedFindings } from './recommended-current.js';
import { recoveryFindings } from './recovery.js';
import { regulationFindings } from './regulation.js';
import { sharingFindings } from './sharing.js';
import { shortCircuitFindings } from './short-circuit.js';
import { soakedOf, soakFindings } from './soak.js';
import { stackFindings } from './stack.js';
import { steadinessFindings } from './steadiness.js';
import { usableCurrent } from './usable-current.js';
import { warmDropout } from './warm-dropout.js';

/**
 * Everything that a record's evidence shows, in the order in which a reader wants it. Pure: the same
 * record gives the same findings, whoever made it and whenever. What was not measured is not there.
 */
export function analyse(evidence: Evidence): readonly Finding[] {
  const held = heldPoints(evidence.steps);
  const unsteady = steadinessFindings(evidence, held);
  const edge = numberNamed('unsteady-above-current', unsteady) ?? Number.POSITIVE_INFINITY;
  const steady = held.filter((point) => point.current < edge);
  const cold = coldPoints(steady);
  const knee = findKnee(cold);
  const ramp = new Set(stepsOf(evidence, 'load-ramp').map((step) => step.step));
  const regulated = steady.filter(
    (point) => ramp.has(point.step) && point.current < (knee?.breakpoint ?? Number.POSITIVE_INFINITY),
  );
  const idle = openCircuitFindings(evidence);
  const regulation = regulationFindings(evidence, regulated, idle.length > 0);
  const droop = numberNamed('droop-resistance', regulation);
  const dropout = dropoutFindings(evidence, dropoutBracket(evidence), {
    held: steady,
    resistance: knee === undefined ? droop : -knee.right.slope,
  });
  const openCircuit = numberNamed('open-circuit-voltage', [...idle, ...regulation]);
  const trace = limitTraceOf(evidence, { openCircuit, droop });
  const style = limitStyleFindings(evidence, {
    dropout: numberNamed('dropout-current', dropout),
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

function numberNamed(name: string, findings: readonly Finding[]): number | undefined {
  const value = findingNamed(findings, name)?.value;
  return typeof value === 'number' ? value : undefined;
}
