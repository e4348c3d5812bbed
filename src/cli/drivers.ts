import { loadMayStillBeOn } from '../bench/make-safe.js';
import { realClock } from '../clock/real-clock.js';
import { exitCodeOf, exitCodes, type ExitCode, RailproofError } from '../errors/railproof-error.js';
import { parseAddress } from '../files/connection-address.js';
import type { Driver } from '../files/driver.js';
import { readDriver } from '../files/read-driver.js';
import { shippedNames } from '../files/shipped-file.js';
import { tryDriver, type TrialResult } from '../instrument/trial.js';
import { visible } from '../instrument/visible.js';
import { printable } from '../quantity/printable.js';
import { jsonText } from '../report/json-text.js';
import { alignTable } from '../report/align.js';
import { connectors } from './connectors.js';
import { errorText } from './error-text.js';
import { stopOnSignals } from './stop-signals.js';
import type { Streams } from './streams.js';
import { shipped } from './wiring.js';

/** `--try` and `--connection` go together. */
export class TrialUsageError extends RailproofError {
  readonly code = 'TRIAL_USAGE';
  readonly exitCode = exitCodes.usage;

  constructor() {
    super('--try needs --connection, and --connection needs --try', {
      advice: 'for example: railproof drivers --try load-input-scpi --connection tcp://127.0.0.1:5025',
    });
  }
}

const shelves = { relativeTo: '.', shipped: shipped.drivers };

interface Wanted {
  readonly try?: string;
  readonly connection?: string;
  readonly json?: boolean;
}

/** `railproof drivers`: lists the shipped ones, or walks through one against an instrument. */
export async function drivers(wanted: Wanted, streams: Streams): Promise<ExitCode> {
  if ((wanted.try === undefined) !== (wanted.connection === undefined)) throw new TrialUsageError();
  return wanted.try === undefined || wanted.connection === undefined
    ? list(wanted.json === true, streams)
    : tryOut(wanted.try, wanted.connection, wanted.json === true, streams);
}

async function list(json: boolean, streams: Streams): Promise<ExitCode> {
  const names = await shippedNames(shipped.drivers);
  const found = await Promise.all(names.map(async (name) => (await readDriver(name, shelves)).value));
  if (json) {
    const listed = found.map(({ name, role, summary }) => ({ name, role, summary }));
    streams.stdout.write(jsonText({ format: 'railproof/drivers 1', drivers: listed }));
  } else {
    const rows = found.map(({ name, role, summary }) => [name, role, printable(summary)]);
    streams.stdout.write(`${alignTable(rows, ['left', 'left', 'left']).join('\n')}\n`);
  }
  return exitCodes.conforms;
}

async function tryOut(name: string, address: string, json: boolean, streams: Streams): Promise<ExitCode> {
  const { value: driver } = await readDriver(name, shelves);
  const connection = await connectors(realClock)(parseAddress(address), driver, driver.role);
  const results: TrialResult[] = [];
  const stop = stopOnSignals(streams);
  stop.hurry.addEventListener('abort', () => void connection.close(), { once: true });
  let ending: Ending = { how: 'as-it-should' };
  try {
    if (!json) streams.stderr.write(`${driver.name} at ${printable(connection.address)}\n`);
    const onResult = (result: TrialResult): void => {
      results.push(result);
      if (!json) streams.stdout.write(`${resultLine(result)}\n`);
    };
    await tryDriver({ driver, connection, clock: realClock, signal: stop.signal, onResult });
    if (stop.signal.aborted) ending = { how: 'stopped', error: stop.signal.reason };
  } catch (error) {
    ending = { how: 'broken-off', error: stop.signal.aborted ? stop.signal.reason : error };
  } finally {
    await connection.close();
    stop.release();
  }
  streams.stdout.write(json ? trialAsJson(driver, results) : countLine(results));
  return tell(driver, results, ending, streams);
}

type Ending =
  { readonly how: 'as-it-should' } | { readonly how: 'stopped' | 'broken-off'; readonly error: unknown };

/** The last words are how a load was left. */
function tell(
  driver: Driver,
  results: readonly TrialResult[],
  ending: Ending,
  { stderr }: Streams,
): ExitCode {
  if (ending.how !== 'as-it-should') stderr.write(`${errorText(ending.error)}\n`);
  const last = results.at(-1);
  const off = ending.how !== 'broken-off' && last?.part === 'proof' && last.verdict === 'understood';
  if (driver.role === 'load') {
    stderr.write(off ? 'The load is off; it was read back.\n' : `${loadMayStillBeOn}\n`);
  }
  if (ending.how !== 'as-it-should') return exitCodeOf(ending.error);
  if (driver.role === 'load' && !off) return exitCodes.instrument;
  return results.some(({ verdict }) => verdict === 'refused' || verdict === 'silent')
    ? exitCodes.doesNotConform
    : exitCodes.conforms;
}

function trialAsJson({ name }: Driver, results: readonly TrialResult[]): string {
  return jsonText({ format: 'railproof/trial 1', driver: name, results });
}

function countLine(results: readonly TrialResult[]): string {
  const understood = results.filter(({ verdict }) => verdict === 'understood').length;
  const sent = results.filter(({ verdict }) => verdict !== 'not-sent').length;
  return `${understood} of ${sent} messages understood\n`;
}

const widthOfVerdict = 11;
const widthOfName = 19;
const widthOfSent = 22;

function resultLine({ verdict, name, sent, received, detail, seconds }: TrialResult): string {
  const answered = received === undefined || received === '' ? '' : `→ ${received}`;
  const time = verdict === 'not-sent' ? '' : `${Math.round(seconds * 1000)} ms`;
  return [
    verdict.padEnd(widthOfVerdict),
    name.padEnd(widthOfName),
    visible(sent).padEnd(widthOfSent),
    time.padStart(7),
    [answered, detail].filter((part) => part !== '').join('  '),
  ]
    .join(' ')
    .trimEnd();
}
