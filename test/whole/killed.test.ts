import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { once } from 'node:events';
import { connect } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { monitorEventLoopDelay } from 'node:perf_hooks';
import { afterAll, expect, it } from 'vitest';
import { realClock } from '../../src/clock/real-clock.js';
import { formatQuantity } from '../../src/quantity/format-quantity.js';
import { checkJournal } from '../../src/record/journal-check.js';
import { readJournal } from '../../src/record/journal-reader.js';
import type { ReadingTaken } from '../../src/record/journal-event.js';
import { understand } from '../../src/report/understand.js';
import { randomFrom } from '../../src/statistics/random.js';
import { journalOf, until } from './at-the-bench.js';
import { startInTerminal } from './in-terminal.js';
import { serve } from './served.js';
import { watches, watchmenOf } from './watchmen.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-killed-'));
const kinds = ['load-ramp', 'dropout-search', 'soak'];
/** Each begins with another of the steps: so all of them are met, however slow this machine is. */
const procedures = kinds.map((kind, first) => {
  const steps = [
    '  - load-ramp: { from: 1 A, to: 4 A, points: 30, dwell: 50 ms, readings: 2 }',
    '  - dropout-search: { from: 4 A, ceiling: 7 A, climb: 6, dwell: 50 ms, readings: 2, watch: 500 ms }',
    '  - soak: { current: 2 A, for: 1 min, every: 1 s, dwell: 50 ms, over: 10 s }',
  ];
  const turned = [...steps.slice(first), ...steps.slice(0, first)];
  const file = join(folder, `${kind}-first.yaml`);
  writeFileSync(
    file,
    ['railproof: procedure 1', `name: ${kind}-first`, 'title: Brisk', 'steps:', ...turned, ''].join('\n'),
  );
  return file;
});

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

/** RAILPROOF_KILL_SEED tries other moments. */
const seed = Number(process.env['RAILPROOF_KILL_SEED'] ?? 1);
const benches = 5;
const killsEach = 10;
/** Seconds after the input was first switched on. */
const latest = 2.5;

interface Killed {
  readonly seed: number;
  readonly bench: number;
  readonly kill: number;
  readonly moment: number;
  /** Seconds after the kill at which the load was last seen on. */
  readonly lastOn: number;
  /** The longest time for which this machine gave us no turn meanwhile, in seconds. */
  readonly stall: number;
  readonly shown: number;
  readonly kind: string;
  readonly wrong: readonly string[];
}

it(
  'a run that is killed at any moment leaves the load off within 2 s, no reading that was shown unrecorded, and nobody behind',
  { timeout: 300_000 },
  async () => {
    const random = randomFrom(seed);
    const moments = Array.from({ length: benches }, () =>
      Array.from({ length: killsEach }, () => random.uniform(0, latest)),
    );
    const all = (await Promise.all(moments.map((of, bench) => killsAt(bench, of)))).flat();
    expect(all).toHaveLength(benches * killsEach);
    expect(all.filter(({ wrong }) => wrong.length > 0)).toEqual([]);
    expect(all.filter(({ lastOn, stall }) => lastOn > 2 + stall)).toEqual([]);
    // All this would show nothing if the load had been off, or nothing on the screen.
    expect(all.filter(({ lastOn }) => lastOn > 0).length).toBeGreaterThan(killsEach);
    expect(new Set(all.map(({ kind }) => kind))).toEqual(new Set(kinds));
    expect(all.filter(({ shown }) => shown > 0).length).toBeGreaterThan(all.length / 2);
  },
);

async function killsAt(bench: number, moments: readonly number[]): Promise<readonly Killed[]> {
  const served = await serve('fixtures/benches/nursery.yaml', join(folder, `bench-${bench}.yaml`), 'tcp');
  try {
    const killed: Killed[] = [];
    for (const [kill, moment] of moments.entries()) {
      const procedure = procedures[(bench + kill) % procedures.length] ?? '';
      const outcome = await killAt(served.bench, procedure, moment, join(folder, `run-${bench}-${kill}`));
      killed.push({ seed, bench, kill, moment, ...outcome });
    }
    return killed;
  } finally {
    await served.close();
  }
}

type Outcome = Omit<Killed, 'seed' | 'bench' | 'kill' | 'moment'>;

async function killAt(bench: string, procedure: string, moment: number, runs: string): Promise<Outcome> {
  const load = lookAtLoad(bench);
  const run = await startInTerminal(
    ['run', procedure, '--bench', bench, '--module', 'fixtures/modules/K1.yaml', '--runs', runs, '--yes'],
    `${runs}.session`,
    { rows: 24 },
  );
  try {
    await until(() => journalOf(runs).includes('"event":"input","state":"on"'));
    await realClock.sleep(moment);
    const [watching = 0] = watchmenOf(run.pid);
    const delay = monitorEventLoopDelay({ resolution: 10 });
    delay.enable();
    process.kill(run.pid, 'SIGKILL');
    const lastOn = await load.offFor(() => !watches(watching, run.pid));
    delay.disable();
    await run.closed;
    const record = join(runs, readdirSync(runs)[0] ?? '');
    const { integrity, watchman, evidence } = understand(record);
    const wrong = watchmenOf(run.pid).map((left) => `the watchman ${left} was left behind`);
    if (integrity.kind !== 'cut-off') wrong.push(`the journal is ${integrity.kind}`);
    if (watchman?.outcome !== 'off') wrong.push(`the watchman's report: ${JSON.stringify(watchman)}`);
    const shown = shownIn(run.shown());
    const lost = notAmong(shown, sampledIn(record));
    if (lost !== undefined) wrong.push(`shown and not in the journal, in this order: ${lost}`);
    const kind = evidence.steps.at(-1)?.kind ?? 'none';
    return { lastOn, stall: delay.max / 1e9, shown: shown.length, kind, wrong };
  } finally {
    load.close();
  }
}

interface Look {
  /** Looks until `over`, and the load is off: when, in seconds from the call, it was last seen on. */
  offFor(over: () => boolean): Promise<number>;
  close(): void;
}

/** Looks at the load itself, on a line of its own, as somebody at its front panel would. */
function lookAtLoad(bench: string): Look {
  const port = Number(/load:.*tcp:\/\/127\.0\.0\.1:(\d+)/.exec(readFileSync(bench, 'utf8'))?.[1]);
  const socket = connect({ port, host: '127.0.0.1', noDelay: true });
  return {
    async offFor(over) {
      const began = realClock.now();
      let lastOn = 0;
      for (;;) {
        // Whether it is over is looked at first: what was still on its way to the load then has arrived.
        const isOver = over();
        socket.write('INP?\n');
        const [reply] = (await once(socket, 'data')) as [Buffer];
        const isOn = reply.toString().trim() === '1';
        if (isOn) lastOn = realClock.now() - began;
        if ((isOver && !isOn) || realClock.now() - began > 30) return lastOn;
        await realClock.sleep(0.02);
      }
    },
    close: () => socket.destroy(),
  };
}

/** Voltage and current as the block showed them, in the order in which it did. */
function shownIn(screen: string): readonly string[] {
  return [...screen.matchAll(/ {2}(-?[\d.]+ [mµk]?V) {2,}(-?[\d.]+ [mµn]?A) {2,}/g)].map(
    ([, voltage, current]) => `${voltage ?? ''} ${current ?? ''}`,
  );
}

/** The same of every sample that the journal holds. */
function sampledIn(record: string): readonly string[] {
  const samples: string[] = [];
  const journal = join(record, 'journal.jsonl');
  let voltage = Number.NaN;
  const text = ({ value }: ReadingTaken, dimension: 'voltage' | 'current'): string =>
    formatQuantity(value ?? Number.NaN, dimension, { significant: 4 });
  readJournal(journal, checkJournal(journal), (event) => {
    if (event.event !== 'reading') return;
    if (event.of === 'meter' && event.what === 'voltage') voltage = event.value ?? Number.NaN;
    if (event.of === 'load' && event.what === 'current')
      samples.push(`${text({ ...event, value: voltage }, 'voltage')} ${text(event, 'current')}`);
  });
  return samples;
}

/** The first of `shown` that does not follow in `samples` on the one before it. */
function notAmong(shown: readonly string[], samples: readonly string[]): string | undefined {
  let from = 0;
  for (const one of shown) {
    const at = samples.indexOf(one, from);
    if (at === -1) return one;
    from = at;
  }
  return undefined;
}
