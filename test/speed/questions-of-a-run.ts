import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type * as realClocks from '../../src/clock/real-clock.js';
import type { Clock } from '../../src/clock/clock.js';
import type * as plans from '../../src/cli/load-plan.js';
import type * as performances from '../../src/cli/perform-plan.js';
import type * as wiring from '../../src/cli/wiring.js';
import type { RunWatcher } from '../../src/run/perform.js';
import { built } from './built.js';

const { realClock } = await built<typeof realClocks>('clock/real-clock.js');
const { loadPlan } = await built<typeof plans>('cli/load-plan.js');
const { performPlan } = await built<typeof performances>('cli/perform-plan.js');
const { worldOf } = await built<typeof wiring>('cli/wiring.js');

/** What a ramp came to on the wire. */
export interface Asked {
  /** Each answered before the next one. Those of the set-points and of the input, a few at each point, are not among them. */
  readonly questions: number;
  readonly seconds: number;
}

/** The addresses of a bench, as its file writes them. */
export interface Addresses {
  readonly load: string;
  readonly meter: string;
}

/** So many points has a ramp; at the end of each the journal is on the disk. */
const points = 4;

/**
 * A ramp as `railproof run` performs it: shipped drivers, guards, watchman, a record on the disk. Only the waits for
 * the module, before each sample, are not waited, since whoever times questions has nothing from them. Timed from
 * where the step begins to where it is done.
 *
 * @param samples at each point, of three questions: the meter's voltage, the load's voltage and its current
 */
export async function rampOver(addresses: Addresses, samples: number): Promise<Asked> {
  const folder = mkdtempSync(join(tmpdir(), 'railproof-speed-'));
  try {
    const loaded = await loadPlan({
      procedure: written(folder, 'ramp.yaml', procedureText(samples)),
      bench: written(folder, 'bench.yaml', benchText(addresses)),
      modules: ['fixtures/modules/K1.yaml'],
    });
    const { plan } = loaded;
    const world = { ...(await worldOf(plan.bench, plan.drivers)), clock: withoutWaits };
    const never = new AbortController().signal;
    const seen = rampSeen();
    const { ending } = await performPlan(loaded, world, {
      runs: join(folder, 'runs'),
      operator: { present: false, acknowledge: () => Promise.resolve('--yes'), ask: noOne },
      signal: never,
      hurry: never,
      watch: seen.watch,
    });
    if (ending.how !== 'completed') throw ending.error;
    return seen.asked();
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

const withoutWaits: Clock = {
  ...realClock,
  // eslint-disable-next-line @typescript-eslint/require-await -- what it throws must reject
  sleep: async (_seconds, signal) => signal?.throwIfAborted(),
};

function rampSeen(): { readonly watch: RunWatcher; readonly asked: () => Asked } {
  let [questions, began, ended] = [0, Number.NaN, Number.NaN];
  let isRamp = false;
  const watch: RunWatcher = {
    stepBegan: (_step, kind) => {
      isRamp = kind === 'load-ramp';
      if (isRamp) began = realClock.now();
    },
    recorded: ({ event }) => {
      if (isRamp && event === 'reading') questions += 1;
      if (isRamp && event === 'step-ended') ended = realClock.now();
    },
    progress: () => undefined,
    noticed: () => undefined,
  };
  return { watch, asked: () => ({ questions, seconds: ended - began }) };
}

function noOne(): Promise<never> {
  return Promise.reject(new Error('nobody stands at this bench'));
}

function written(folder: string, name: string, text: string): string {
  const path = join(folder, name);
  writeFileSync(path, text);
  return path;
}

function benchText({ load, meter }: Addresses): string {
  return [
    'railproof: bench 1',
    'name: the bench of a benchmark',
    'instruments:',
    `  load: { driver: load-input-scpi, connection: '${load}' }`,
    `  meter: { driver: meter-read-scpi, connection: '${meter}' }`,
    'leads: { resistance: 35 mΩ, uncertainty: 5 mΩ }',
    'voltage-from: meter-at-module',
    'limits: { voltage: 60 V, current: 8 A, power: 150 W }',
    '',
  ].join('\n');
}

function procedureText(samples: number): string {
  return [
    'railproof: procedure 1',
    'name: ramp',
    'title: A ramp of many readings',
    'purpose: To time questions.',
    'cautions: []',
    'steps:',
    '  - open-circuit: { for: 1 ms }',
    `  - load-ramp: { from: 1 A, to: 4 A, points: ${points}, dwell: 0 s, readings: ${samples} }`,
    'derating: { margin: 80 %, above-nameplate: never }',
    '',
  ].join('\n');
}
