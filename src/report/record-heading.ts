import type { Evidence } from '../analysis/evidence.js';
import { asGiven } from '../analysis/in-words.js';
import { ratedOf } from '../analysis/rated.js';
import type { RunHeader } from '../record/run-header.js';
import { inMinutes } from './in-minutes.js';
import { takenOver } from './taken-over.js';

/** `K1`, or `K1+K2+K3`. */
export function modulesInWords({ modules }: Pick<RunHeader, 'modules'>): string {
  return modules.map(({ name }) => name).join('+');
}

/** `K1, K2, K3`. */
export function modulesListed({ modules }: Pick<RunHeader, 'modules'>): string {
  return modules.map(({ name }) => name).join(', ');
}

/** What was measured on another day. */
export function takenOverInWords(evidence: Pick<Evidence, 'resumed'>): readonly string[] {
  return takenOver(evidence).map(({ first, last, run, began }) => {
    const steps = first === last ? `step ${first}` : `steps ${first} to ${last}`;
    return `${steps} taken over from ${run}, ${inMinutes(began)}`;
  });
}

/** Of several modules: how they are wired, and what their labels amount to together. */
export function circuitInWords(header: RunHeader): readonly string[] {
  const { circuit, modules } = header;
  if (circuit === 'single') return [];
  const whole = plateInWords(ratedOf(header));
  const wired = circuit === 'parallel' ? 'in parallel' : 'in series, the lowest first';
  return [`${modules.length} modules ${wired} · together ${whole}`];
}

export function plateInWords({
  voltage,
  current,
}: {
  readonly voltage: number;
  readonly current: number;
}): string {
  return `${asGiven(voltage, 'voltage')}, ${asGiven(current, 'current')}`;
}

export function againstWhat({ baseline }: Pick<RunHeader, 'baseline'>): readonly string[] {
  if (baseline === undefined) return [];
  const { run, tolerance } = baseline;
  return [`compared with ${run}, tolerance ${tolerance.name}: ${tolerance.title}`];
}
