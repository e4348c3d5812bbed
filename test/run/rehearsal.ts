import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll } from 'vitest';
import { simulatedOperator } from '../../src/cli/simulated-operator.js';
import { vocabulary } from '../../src/cli/vocabulary.js';
import type { InputState } from '../../src/bench/load.js';
import type { Module } from '../../src/files/module.js';
import { parseProcedure } from '../../src/files/read-procedure.js';
import { journalFormat, type JournalEvent, type TimedEvent } from '../../src/record/journal-event.js';
import { checkJournal, type Integrity } from '../../src/record/journal-check.js';
import { readJournal } from '../../src/record/journal-reader.js';
import { JournalWriter } from '../../src/record/journal-writer.js';
import { perform, type Performed } from '../../src/run/perform.js';
import { makePlan, type Plan } from '../../src/run/plan.js';
import { stepKinds } from '../../src/steps/index.js';
import type { Operator } from '../../src/steps/operator.js';
import { type Nursery, nursery, type NurseryChange } from '../bench/nursery-bench.js';
import { k1 } from '../steps/one-step.js';

/** A procedure with these steps, a line each as a file writes them. */
export function procedureOf(steps: readonly string[], cautions = '[]', wiring = '[]', limits = '{}') {
  const text = [
    'railproof: procedure 1',
    'name: rehearsal',
    'title: A rehearsal',
    'purpose: To see how a run goes.',
    `cautions: ${cautions}`,
    'steps:',
    ...steps.map((step) => `  - ${step}`),
    'derating: { margin: 80 %, above-nameplate: never }',
    `wiring: ${wiring}`,
    `limits: ${limits}`,
    '',
  ].join('\n');
  return parseProcedure(text, 'rehearsal.yaml', vocabulary);
}

export interface RehearsalChange extends NurseryChange {
  readonly steps: readonly string[];
  readonly cautions?: string;
  readonly wiring?: string;
  /** The procedure's own, as its file writes them; those of the bench are `limits`. */
  readonly asksFor?: string;
  readonly operator?: (bench: Nursery) => Operator;
  readonly signal?: AbortSignal;
  /** Told of each event before it is journalled; what it throws is as if the journal had failed. */
  readonly onEvent?: (event: JournalEvent, bench: Nursery) => void;
  /** Its module file; K1's when left out. */
  readonly label?: Module;
  readonly rated?: { readonly voltage: number; readonly current: number };
}

export interface Rehearsal extends Performed {
  readonly plan: Plan;
  readonly events: readonly TimedEvent[];
  readonly integrity: Integrity;
  readonly bench: Nursery;
  /** What was told to whoever watches: the steps that began. */
  readonly watched: readonly string[];
  /** What the person at the bench was told to stay. */
  readonly noticed: readonly string[];
  /** Each change of the input at the load itself, as it really was. */
  readonly inputs: readonly InputState[];
}

const folder = mkdtempSync(join(tmpdir(), 'railproof-run-'));
let made = 0;

export function tidyUp(): void {
  afterAll(() => {
    rmSync(folder, { recursive: true, force: true });
  });
}

/** Performs a plan on a nursery bench, with a real journal; the bench is closed again. */
export async function rehearse(change: RehearsalChange): Promise<Rehearsal> {
  const path = join(folder, `journal-${(made += 1)}.jsonl`);
  const append = (event: JournalEvent): void => {
    change.onEvent?.(event, place);
    journal.append(event);
  };
  const place = await nursery({
    ...change,
    onInput: (state, confirmed) => {
      append({ event: 'input', state, confirmed });
    },
    onNotice: (text) => {
      append({ event: 'notice', text });
    },
  });
  const inputs: InputState[] = [];
  place.simulation.world.onStep(() => {
    const { input } = place.simulation.world.load;
    if (input !== (inputs.at(-1) ?? 'off')) inputs.push(input);
  });
  const label = change.label ?? k1;
  const module = { ...label, rated: change.rated ?? label.rated };
  const plan = makePlan(
    procedureOf(change.steps, change.cautions, change.wiring, change.asksFor),
    [module],
    place.description,
    place.drivers,
    stepKinds,
  );
  const journal = new JournalWriter(path, () => place.clock.now());
  append({ event: 'opened', format: journalFormat, wallClock: place.clock.wall().toISOString(), header: '' });
  const bench = await place.open(plan.ceilings);
  const watched: string[] = [];
  const noticed: string[] = [];
  const performed = await perform({
    plan,
    bench,
    journal: { append },
    operator: change.operator?.(place) ?? simulatedOperator(place.simulation),
    clock: place.clock,
    signal: change.signal ?? new AbortController().signal,
    watch: {
      stepBegan: (step, kind, summary) => watched.push(`${step} ${kind}: ${summary}`),
      progress: () => undefined,
      recorded: () => undefined,
      noticed: (text) => noticed.push(text),
    },
  });
  journal.close();
  await bench.close();
  const events: TimedEvent[] = [];
  const integrity = readJournal(path, checkJournal(path), (event) => events.push(event));
  return { ...performed, plan, noticed, events, integrity, bench: place, watched, inputs };
}
