import type { ChildProcess } from 'node:child_process';
import { copyFileSync, mkdirSync, writeFileSync } from 'node:fs';
import { connect } from 'node:net';
import { once } from 'node:events';
import { join } from 'node:path';
import { realClock } from '../../src/clock/real-clock.js';
import { planDrivers, readBenchDrivers } from '../../src/cli/bench-drivers.js';
import { withAddresses } from '../../src/files/live-bench.js';
import { readBench } from '../../src/files/read-bench.js';
import { type ServedBench, serveBench } from '../../src/simulation/serve.js';
import { type Ended, ended, start } from '../whole/railproof.js';
import { writeBenchFiles } from './bench-files.js';
import { FaultLine } from './fault-line.js';
import { type FaultName, faults } from './faults.js';
import { hearing, runsIn } from './hearing.js';
import { leftBehind } from './left-behind.js';
import { type Moment, scenes } from './moments.js';
import { smallDisk } from './small-disk.js';
import { overPty, overTcp, type Wire } from './wire.js';

export interface CellWanted {
  readonly fault: FaultName;
  readonly moment: Moment;
  readonly lines: 'tcp' | 'pty';
  /** Of its own, and empty. */
  readonly folder: string;
}

/** A reading that the program was given and has taken, as the line knows it. */
export interface Given {
  readonly of: string;
  readonly what: string;
  readonly value: number | 'overload' | 'not-a-number';
}

/** What came of one run. */
export interface Cell extends Ended {
  /** The instrument's input after the end: as it says itself on a line of its own, and as it is. */
  readonly input: { readonly says: string; readonly is: 'on' | 'off' };
  /** As the bench file of the run named them. */
  readonly addresses: { readonly load: string; readonly meter: string };
  /** Since the first step began, in order. */
  readonly given: readonly Given[];
  /** The path of its journal. */
  readonly journal: string;
  /** How many still had a line to an instrument open. */
  readonly stillConnected: number;
  /** The processes that outlived the run. */
  readonly leftBehind: readonly string[];
}

/** Why a cell can't be had on this machine. */
export interface Impossible {
  readonly impossible: string;
}

/** With it the program's wall clock can be set from outside: half a year on, and not a second of its own time. */
const settableClock = `data:text/javascript,${encodeURIComponent(`
  const now = Date.now;
  let ahead = 0;
  process.on('SIGUSR2', () => { ahead += 1.6e10; });
  globalThis.Date = class extends Date {
    constructor(...parts) { parts.length > 0 ? super(...parts) : super(now() + ahead); }
    static now() { return now() + ahead; }
  };`)}`;

/** Runs a brisk procedure on a bench of its own; when the moment has come the fault strikes. */
export async function runCell({ fault, moment, lines, folder }: CellWanted): Promise<Cell | Impossible> {
  const runs = join(folder, 'runs');
  const disk = fault === 'disk-full' ? smallDisk(runs) : undefined;
  if (disk === undefined) mkdirSync(runs);
  else if ('missing' in disk) return { impossible: disk.missing };
  const scene = scenes[moment];
  const files = writeBenchFiles(folder, scene);
  const bench = await readBench(files.simulated);
  const served = await serveBench({
    bench: bench.value,
    drivers: planDrivers(await readBenchDrivers(bench)),
    clock: realClock,
  });
  const given: Given[] = [];
  let program: ChildProcess | undefined;
  const hearLoad = hearing(scene, fault, runs, {
    strike: () => {
      faults[fault]({
        load,
        meter,
        fillDisk: () => disk?.fill(),
        jumpClock: () => program?.kill('SIGUSR2'),
      });
    },
    stop: () => program?.kill('SIGINT'),
  });
  const wire = async (post: 'load' | 'meter'): Promise<Wire> => {
    const line = await FaultLine.open({
      upstream: portOf(served, post),
      hear: post === 'load' ? hearLoad.message : () => undefined,
      answers: {
        given: (question, answer) => {
          const reading = readings.get(question);
          if (reading !== undefined && hearLoad.reporting())
            given.push({ ...reading, value: numberIn(answer) });
        },
        notTaken: (question) => {
          const reading = readings.get(question);
          const last = given.findLastIndex(({ of, what }) => of === reading?.of && what === reading.what);
          if (last >= 0) given.splice(last, 1);
        },
      },
    });
    return lines === 'tcp' ? overTcp(line) : overPty(line, join(folder, post));
  };
  const load = await wire('load');
  const meter = await wire('meter');
  try {
    const addresses = { load: load.address, meter: meter.address };
    const live = join(folder, 'live.yaml');
    writeFileSync(live, withAddresses(bench.text, addresses));
    program = start(
      [
        ...['run', files.procedure, '--bench', live, '--module', 'fixtures/modules/K1.yaml'],
        ...['--runs', runs, '--yes'],
      ],
      { env: { RAILPROOF_CELL: folder }, node: fault === 'clock-jump' ? ['--import', settableClock] : [] },
    );
    const end = await ended(program);
    return {
      ...end,
      leftBehind: await leftBehind(folder),
      stillConnected: lines === 'tcp' ? load.line.clients + meter.line.clients : 0,
      input: { says: await inputOf(served), is: served.world.load.input },
      addresses,
      given,
      journal: keepJournal(runs, folder, end),
    };
  } finally {
    await load.close();
    await meter.close();
    await served.close();
    disk?.remove();
  }
}

const readings = new Map([
  ['READ?', { of: 'meter', what: 'voltage' }],
  ['MEAS:VOLT?', { of: 'load', what: 'voltage' }],
  ['MEAS:CURR?', { of: 'load', what: 'current' }],
]);

/** SCPI-99's own two numbers that are none. */
function numberIn(answer: string): Given['value'] {
  const value = Number(answer);
  if (value === 9.91e37) return 'not-a-number';
  return value === 9.9e37 ? 'overload' : value;
}

function portOf(served: ServedBench, post: 'load' | 'meter'): number {
  return Number(/:(\d+)$/.exec(served.addresses[post] ?? '')?.[1]);
}

/** As somebody at its front panel would look. */
async function inputOf(served: ServedBench): Promise<string> {
  const socket = connect(portOf(served, 'load'), '127.0.0.1');
  socket.write('INP?\n');
  const [reply] = (await once(socket, 'data')) as [Buffer];
  socket.destroy();
  return reply.toString().trim();
}

/** A copy: the disk may go away with the cell. */
function keepJournal(runs: string, folder: string, { stderr }: Ended): string {
  const [run] = runsIn(runs);
  if (run === undefined) throw new Error(`there is no record: ${stderr}`);
  const kept = join(folder, 'journal.jsonl');
  copyFileSync(join(runs, run, 'journal.jsonl'), kept);
  return kept;
}
