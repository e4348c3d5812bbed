import { writeSync } from 'node:fs';
import { makeSafeUnopened } from '../bench/make-safe.js';
import { type Order, readOrder } from '../bench/watchman-order.js';
import { type Deed, keepWatch } from '../bench/watchman.js';
import { realClock } from '../clock/real-clock.js';
import type { ConnectionAddress } from '../files/bench.js';
import { formatAddress } from '../files/connection-address.js';
import { runFolderAt } from '../record/run-folder.js';
import { watchmanFormat, type WatchmanReport, writeWatchmanReport } from '../record/watchman-report.js';
import { printable } from '../quantity/printable.js';
import { watchmanText } from '../report/watchman-text.js';
import { connectors } from './connectors.js';
import { LastWords } from './last-words.js';
import { listenToRunner, type RunnerLine } from './runner-line.js';

/**
 * The watchman: a process of its own that `railproof run` starts, named after the process that it watches. It
 * loads little, and all that it will need before it says that it is ready: later there may be no disk to load
 * from. It ends with its run and, where it must act, about a minute later at the latest. So it heeds no wish to
 * end: when a machine is shut down everybody is told to, and it must be the last to go.
 */
for (const wish of ['SIGINT', 'SIGTERM', 'SIGHUP', 'SIGQUIT']) process.on(wish, () => undefined);
const runner = listenToRunner(process.stdin, Number(process.argv[2]));
const order = await runner.order;
if (order !== undefined) await watch(readOrder(order), runner);
process.stdin.destroy();

async function watch({ folder, bench, driver }: Order, line: RunnerLine): Promise<void> {
  await loadWayTo(bench.instruments.load.connection);
  const words = new LastWords();
  sayReady();
  const deed = await keepWatch({
    runner: line,
    clock: realClock,
    makeSafe: (pauses) =>
      makeSafeUnopened(
        { bench, drivers: { load: driver }, connect: connectors(realClock), clock: realClock },
        pauses,
      ),
    say: (text) => {
      words.say(text);
    },
  });
  if (deed === undefined) return;
  const report = reportOf(deed);
  words.say(`railproof: ${watchmanText(report)}. Its record: ${printable(folder)}.${adviceOf(deed)}`);
  try {
    writeWatchmanReport(runFolderAt(folder), report);
  } catch {
    // The disk may be why the runner is gone. What matters is done, and said.
  }
  await words.end();
}

/** As the connectors would load it on first use. */
async function loadWayTo(address: ConnectionAddress): Promise<void> {
  if (address.kind === 'tcp') await import('../instrument/tcp-connection.js');
  if (address.kind !== 'serial') return;
  const { loadSerialPackage } = await import('../instrument/serial-connection.js');
  await loadSerialPackage(formatAddress(address));
}

function sayReady(): void {
  try {
    writeSync(1, 'ready\n');
  } catch {
    // Nobody reads it any more: then the line from the runner is at its end, too.
  }
}

function reportOf({ why, noticed, address, attempts, safety, took }: Deed): WatchmanReport {
  return {
    format: watchmanFormat,
    noticed: noticed.toISOString(),
    why,
    address,
    attempts,
    outcome: safety.kind === 'confirmed' ? 'off' : 'unconfirmed',
    reason: safety.kind === 'confirmed' ? null : safety.why,
    took: Math.round(took * 1000) / 1000,
  };
}

function adviceOf({ safety }: Deed): string {
  return safety.kind === 'confirmed' ? '' : ` ${safety.advice}`;
}
