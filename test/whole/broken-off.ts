import { createHash } from 'node:crypto';
import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Finding } from '../../src/analysis/finding.js';
import { type LoadedPlan, loadPlan } from '../../src/cli/load-plan.js';
import { performPlan, type PlanPerformed } from '../../src/cli/perform-plan.js';
import { loadResumed } from '../../src/cli/resume-plan.js';
import { simulatedOperator } from '../../src/cli/simulated-operator.js';
import { worldOf } from '../../src/cli/wiring.js';
import type { TimedEvent } from '../../src/record/journal-event.js';
import type { Result } from '../../src/report/result.js';
import { StoppedByOperator } from '../../src/run/stopped.js';
import { nobodyWatches } from './run-quietly.js';

interface Wanted {
  readonly procedure: string;
  readonly bench?: string;
  readonly modules?: readonly string[];
  readonly baseline?: string;
}

/** Performs a procedure on a simulated bench of the nursery; someone wants it to end as that step begins. */
export async function performUntil(
  { procedure, bench = 'nursery', modules = ['K1'], baseline }: Wanted,
  runs: string,
  stopAt?: number,
): Promise<PlanPerformed> {
  const loaded = await loadPlan({
    procedure,
    bench: bench.endsWith('.yaml') ? bench : `fixtures/benches/${bench}.yaml`,
    modules: modules.map((module) => `fixtures/modules/${module}.yaml`),
    baseline,
  });
  return perform(loaded, runs, stopAt);
}

/** Goes on with a run that was broken off. */
export async function resume(run: string, runs: string, stopAt?: number): Promise<PlanPerformed> {
  return perform(await loadResumed({ run, bench: undefined }), runs, stopAt);
}

async function perform(loaded: LoadedPlan, runs: string, stopAt: number | undefined): Promise<PlanPerformed> {
  const world = await worldOf(loaded.plan.bench, loaded.plan.drivers);
  if (world.simulation === undefined) throw new Error('the bench is not simulated');
  const stop = new AbortController();
  return performPlan(loaded, world, {
    runs,
    operator: simulatedOperator(world.simulation),
    signal: stop.signal,
    hurry: new AbortController().signal,
    watch: {
      ...nobodyWatches,
      stepBegan: (step) => {
        if (step === stopAt) stop.abort(new StoppedByOperator('somebody needs the bench'));
      },
    },
  });
}

export function resultOf({ understood }: PlanPerformed): Result {
  if (understood.kind === 'error') throw understood.error;
  return understood.result;
}

/** The events of a journal, without their seals; a line that was torn is left out. */
export function eventsOf(record: string): readonly TimedEvent[] {
  const lines = readFileSync(join(record, 'journal.jsonl'), 'utf8').split('\n').slice(0, -1);
  return lines.map((line) => {
    const { seal, ...event } = JSON.parse(line) as TimedEvent & { seal?: string };
    if (seal !== undefined && seal.length !== 64) throw new Error(`not a seal: ${seal}`);
    return event;
  });
}

/** The events of these steps, from their beginning to their end. */
export function eventsOfSteps(record: string, steps: readonly number[]): readonly TimedEvent[] {
  const events: TimedEvent[] = [];
  let inside = false;
  for (const event of eventsOf(record)) {
    if (event.event === 'step-began') inside = steps.includes(event.step);
    if (inside) events.push(event);
    if (event.event === 'step-ended') inside = false;
  }
  return events;
}

/** Of every byte of every file of a record, and of their names. */
export function fingerprint(record: string): string {
  const hash = createHash('sha256');
  for (const name of readdirSync(record).sort()) hash.update(name).update(readFileSync(join(record, name)));
  return hash.digest('hex');
}

/** Of a value without an interval of its own: it rests on others that have one. */
const allowance = 0.01;

/** Values that were measured twice are as near to each other as both uncertainties allow; words are the same. */
export function differences(one: Result, other: Result): readonly string[] {
  const names = (result: Result): readonly string[] =>
    result.findings.map(({ name, step }) => `${name} of ${String(step)}`);
  if (names(one).join() !== names(other).join()) return [`${names(one).join()} and ${names(other).join()}`];
  return one.findings.flatMap((finding, index) => {
    const there = other.findings[index];
    if (there !== undefined && agree(finding, there)) return [];
    return [`${finding.name}: ${String(finding.value)} and ${String(there?.value)}`];
  });
}

function agree(one: Finding, other: Finding): boolean {
  if (typeof one.value === 'string' || typeof other.value === 'string') return one.value === other.value;
  const [low, high] = one.interval ?? around(one.value);
  const [lowThere, highThere] = other.interval ?? around(other.value);
  return low <= highThere && lowThere <= high;
}

function around(value: number): readonly [number, number] {
  return [value * (1 - allowance), value * (1 + allowance)];
}
