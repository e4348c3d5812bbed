import { cpSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import { once } from 'node:events';
import type { AddressInfo } from 'node:net';
import { join } from 'node:path';
import { railproof } from '../cli/in-process.js';
import { keptOf } from '../cli/kept-drawer.js';
import { changed, fault, runOn } from './variant-bench.js';

type Prints = (folder: string) => Promise<string>;

const steady = { '      unsteady-above: 5.1 A\n': '' };

/** Under each heading of the page, all that the command prints when it happens, on a bench on which it does. */
export const printedByRuns: Readonly<Record<string, Prints>> = {
  'When something puzzles you at the bench': (folder) => runOn(folder, 'quick-look', {}),
  'The load may still be on': async (folder) => print('safe', '--bench', await benchOfNobody(folder)),
  'The connection is refused': async (folder) => runOnNobody(folder, '--yes'),
  'Nobody is at the terminal': (folder) => runOnNobody(folder),
  'The program or the computer died': async (folder) => analyse(cutOff(folder)),
  'A run was cut off': async (folder) => analyse(cutOff(folder)),
  'The seal is broken': async (folder) => analyse(tampered(folder)),
  'It is no record': (folder) => {
    mkdirSync(join(folder, 'empty'), { recursive: true });
    return analyse(join(folder, 'empty'));
  },
  'Points are interrupted': (folder) =>
    runOn(folder, 'quick-look', {
      '  seed: 7\n': '  seed: 7\n  faults: [{ at: 8 s, what: meter-lost, for: 2 s }]\n',
    }),
  'A file is refused': (folder) => {
    const bench = join(folder, 'bench.yaml');
    writeFileSync(bench, changed(readFileSync('fixtures/benches/nursery.yaml', 'utf8'), { leads: 'lead' }));
    return print('check', bench);
  },
  'The plan does not fit the bench': (folder) =>
    runOn(folder, 'real-limit', { 'power: 150 W': 'power: 50 W' }),
  'The module gives nothing': (folder) => runOn(folder, 'quick-look', fault('module-dead', '0 s')),
  'The polarity is reversed': async (folder) =>
    (await runOn(folder, 'quick-look', fault('reversed', '0 s'))) +
    (await runOn(folder, 'quick-look', fault('reversed', '8 s'))),
  'Not what its label says': (folder) => runOn(folder, 'quick-look', { '15.21 V': '9.1 V' }),
  'Meter and load differ with no load': (folder) => runOn(folder, 'quick-look', fault('lead-broken', '0 s')),
  'The load repeats itself': (folder) => runOn(folder, 'quick-look', fault('load-stuck', '8 s')),
  'The meter repeats itself': (folder) => runOn(folder, 'real-limit', fault('meter-stuck', '8 s')),
  'The meter reads less than the load': (folder) => runOn(folder, 'quick-look', fault('lead-broken', '8 s')),
  'The load was off after a gap': (folder) =>
    runOn(folder, 'quick-look', {
      '  seed: 7\n': '  seed: 7\n  faults: [{ at: 8 s, what: load-restarted, for: 2 s }]\n',
    }),
  'The module stays off': (folder) => runOn(folder, 'quick-look', fault('module-dead', '8 s')),
  'It tries again and again': (folder) => runOn(folder, 'real-limit', {}),
  'It latches off': (folder) =>
    runOn(folder, 'real-limit', {
      ...steady,
      'hiccup, current: 5.3 A, period: 800 ms': 'latch-off, current: 5.3 A',
    }),
  'Its output swings': (folder) => runOn(folder, 'real-limit', {}),
  'No limit was met': (folder) =>
    runOn(folder, 'real-limit', { ...steady, 'current: 5.3 A': 'current: 9.3 A' }),
  'The limit is wide': (folder) =>
    runOn(folder, 'quick-look', { ...steady, 'current: 5.3 A': 'current: 3.1 A' }),
  'The limit comes down': (folder) => runOn(folder, 'real-limit', {}),
  'Less is recommended than the label says': (folder) => runOn(folder, 'quick-look', {}),
  'The leads drop too much': (folder) => runOn(folder, 'quick-look', {}),
  'A soak does not settle': (folder) => soak(folder, {}),
  'It drops out when warm': (folder) =>
    soak(folder, { 'limit-per-kelvin: -0.2 %': 'limit-per-kelvin: -2 %' }),
  'Nobody felt how warm': (folder) => soak(folder, { '  thermometer: ': '  # ', ', temperature: 90 °C': '' }),
  'A lead reads open': (folder) =>
    runOn(folder, 'isolation', fault('lead-broken', '0 s'), { bench: 'nursery-isolation' }),
  "It can't be resumed": async (folder) => {
    const runs = join(folder, 'nothing-done');
    await runOn(folder, 'quick-look', fault('module-dead', '0 s'), { more: ['--runs', runs] });
    return print('run', '--resume', join(runs, readdirSync(runs)[0] ?? ''));
  },
  'The comparison says nothing': async (folder) => {
    const fine = recordOf(await runOn(folder, 'quick-look', {}));
    const coarse = recordOf(
      await runOn(folder, 'quick-look', { '  meter: ': '  # ', 'meter-at-module': 'load-terminals' }),
    );
    const otherwise = only(keptOf('K1', 'isolation'));
    return (await print('compare', fine, coarse)) + (await print('compare', fine, otherwise));
  },
};

async function print(...args: readonly string[]): Promise<string> {
  const { stdout, stderr } = await railproof(...args);
  return stdout + stderr;
}

/** Where the record went, as the run says it. */
function recordOf(printed: string): string {
  return /^record: (.*)$/m.exec(printed)?.[1] ?? 'no record was told';
}

function analyse(run: string): Promise<string> {
  return print('analyse', run);
}

/** A bench whose load is at a port at which nothing listens. */
async function benchOfNobody(folder: string): Promise<string> {
  const server = createServer();
  await once(server.listen(0, '127.0.0.1'), 'listening');
  const { port } = server.address() as AddressInfo;
  await new Promise((closed) => server.close(closed));
  const file = join(folder, 'nobody.yaml');
  const limits = 'limits: { voltage: 60 V, current: 8 A, power: 120 W }';
  writeFileSync(
    file,
    `railproof: bench 1\nname: nobody\ninstruments:\n` +
      `  load: { driver: load-input-scpi, connection: "tcp://127.0.0.1:${port}" }\n` +
      `leads: { resistance: 35 mΩ, uncertainty: 5 mΩ }\nvoltage-from: load-terminals\n${limits}\n`,
  );
  return file;
}

async function runOnNobody(folder: string, ...more: readonly string[]): Promise<string> {
  const bench = await benchOfNobody(folder);
  return print('run', 'quick-look', '--bench', bench, '--module', 'fixtures/modules/K1.yaml', ...more);
}

function only(paths: readonly string[]): string {
  const [path, ...others] = paths;
  if (path === undefined || others.length > 0) throw new Error(`one record was wanted: ${paths.join()}`);
  return path;
}

/** A copy of a kept record, its journal changed. */
function copied(
  folder: string,
  name: string,
  change: (lines: readonly string[]) => readonly string[],
): string {
  const copy = join(folder, name);
  cpSync(only(keptOf('K1', 'real-limit')), copy, { recursive: true });
  const journal = join(copy, 'journal.jsonl');
  const lines = readFileSync(journal, 'utf8').split('\n');
  writeFileSync(journal, change(lines).join('\n'));
  return copy;
}

/** It ends in the middle of a line, some lines after the load was switched on. */
function cutOff(folder: string): string {
  return copied(folder, 'cut-off', (lines) => {
    const on = lines.findIndex((line) => /"event":"input".*"state":"on"/.test(line));
    return [...lines.slice(0, on + 5), '{"t":3.2,"ev'];
  });
}

/** A reading is another than it was. */
function tampered(folder: string): string {
  return copied(folder, 'tampered', (lines) =>
    lines.map((line, index) => (index === 20 ? line.replace(/\d(?=[^\d]*$)/, '9') : line)),
  );
}

/** A soak that is given twenty minutes. */
async function soak(folder: string, otherwise: Readonly<Record<string, string>>): Promise<string> {
  const procedure = join(folder, 'short-soak.yaml');
  const shipped = readFileSync('procedures/thermal-soak.yaml', 'utf8');
  writeFileSync(procedure, changed(shipped, { 'name: thermal-soak': 'name: short-soak', '3 h': '20 min' }));
  return runOn(folder, procedure, otherwise, { bench: 'nursery-soak' });
}
