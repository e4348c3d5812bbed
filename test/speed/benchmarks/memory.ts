import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { railproof } from '../../whole/railproof.js';
import type { Benchmark, Figure } from '../figure.js';

const commands = ['run', 'analyse', 'report'] as const;
type Command = (typeof commands)[number];

/** What each of them may use, in MB. */
const allowed = 200;

/**
 * A soak as long as one may be, a look each ten seconds for a week, against one of a tenth of that: the whole run, up
 * to its report on the disk, and both ways of working out again what its record shows. On a bench that has nothing but
 * a load, with which as many readings take the least time; the voltage of its module is never as still as is asked
 * for, so that the soak goes on to its end.
 */
export default (async () => {
  const folder = mkdtempSync(join(tmpdir(), 'railproof-speed-'));
  try {
    const short = await soaked(folder, '16.8 h');
    const long = await soaked(folder, '168 h');
    return commands.flatMap((command) => [growth(command, long, short), most(command, long, short)]);
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}) satisfies Benchmark;

/** How many readings a record has by its own count, and the most memory that each command had in use, in MB. */
interface Soaked {
  readonly readings: number;
  readonly peak: Readonly<Record<Command, number>>;
}

async function soaked(folder: string, time: string): Promise<Soaked> {
  const runs = mkdtempSync(join(folder, 'runs-'));
  const [bench, procedure] = [join(folder, 'bench.yaml'), join(folder, 'soak.yaml')];
  writeFileSync(bench, loadAlone);
  writeFileSync(procedure, soakFor(time));
  try {
    const files = [procedure, '--bench', bench, '--module', 'fixtures/modules/K1.yaml'];
    const run = await peakOf(folder, 'run', ...files, '--runs', runs, '--yes');
    const record = join(runs, readdirSync(runs)[0] ?? '');
    const analyse = await peakOf(folder, 'analyse', record);
    const report = await peakOf(folder, 'report', record);
    return { readings: readingsOf(record), peak: { run, analyse, report } };
  } finally {
    rmSync(runs, { recursive: true });
  }
}

/** Of the whole process, which has the options of Node that it has at a user's: none. */
async function peakOf(folder: string, ...args: readonly string[]): Promise<number> {
  const peak = join(folder, 'peak');
  const { status, stderr } = await railproof(args, {
    node: ['--import', new URL('../measured/peak-memory.js', import.meta.url).href],
    env: { RAILPROOF_PEAK_IN: peak },
  });
  if (status !== 0) throw new Error(`${args.join(' ')} ended with ${status}: ${stderr}`);
  return Number(readFileSync(peak, 'utf8')) / 1e6;
}

function readingsOf(record: string): number {
  const findings: unknown = JSON.parse(readFileSync(join(record, 'findings.json'), 'utf8'));
  return (findings as { readonly readings: number }).readings;
}

function growth(command: Command, long: Soaked, short: Soaked): Figure {
  return {
    kind: 'measured',
    name: `memory-of-${command}`,
    what: `memory of railproof ${command}, ${inMillions(long)} readings`,
    ours: { value: long.peak[command], unit: 'MB' },
    rival: { value: short.peak[command], unit: 'MB', what: `${inMillions(short)} readings` },
    ratio: long.peak[command] / short.peak[command],
    bound: { atMost: 1.15 },
    beside: { readings: long.readings, rivalReadings: short.readings },
  };
}

function most(command: Command, ...soaks: readonly Soaked[]): Figure {
  const peak = Math.max(...soaks.map((soak) => soak.peak[command]));
  return {
    kind: 'measured',
    name: `most-memory-of-${command}`,
    what: `most memory of railproof ${command}`,
    ours: { value: peak, unit: 'MB' },
    rival: { value: allowed, unit: 'MB', what: 'what it may use' },
    ratio: peak / allowed,
    bound: { atMost: 1 },
  };
}

function inMillions({ readings }: Soaked): string {
  return `${(readings / 1e6).toFixed(1)} million`;
}

const loadAlone = `railproof: bench 1
name: nursery bench, the load alone
instruments:
  load: { driver: load-input-scpi, connection: 'simulated:' }
leads: { resistance: 35 mΩ, uncertainty: 5 mΩ }
voltage-from: load-terminals
limits: { voltage: 60 V, current: 8 A, power: 150 W }
simulation:
  seed: 7
  circuit: single
  leads: 35 mΩ
  modules:
    - name: K1
      open-circuit-voltage: 15.21 V
      droop-resistance: 18 mΩ
      limit: { style: hiccup, current: 5.3 A, period: 800 ms }
      noise: 1 mV
      rated-current: 4 A
`;

function soakFor(time: string): string {
  return `railproof: procedure 1
name: long-soak
title: A soak of days
purpose: Whether what is kept of a soak grows with its length.
wiring: [Module unplugged. Load to the output of the module.]
steps:
  - open-circuit: { for: 5 s }
  - soak: { current: 100 % of rated-current, for: ${time}, readings: 41, voltage-within: 0.0000000001 % }
`;
}
