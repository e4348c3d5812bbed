import { exitCodes, type ExitCode } from '../errors/railproof-error.js';
import { readDriver } from '../files/read-driver.js';
import { shippedNames } from '../files/shipped-file.js';
import { printable } from '../quantity/printable.js';
import { fittedTable } from '../report/align.js';
import { jsonText } from '../report/json-text.js';
import type { DriversJson } from './schema/drivers-schema.js';
import type { Streams } from './streams.js';
import { TrialUsageError } from './trial-usage.js';
import { shelves, shipped } from './shipped.js';

export interface DriversOptions {
  readonly try?: string;
  readonly match?: string;
  readonly connection?: string;
  readonly channel?: string;
  readonly write?: string;
  readonly json?: boolean;
}

/** `railproof drivers`: lists the shipped ones, tries one on an instrument, or finds the one that fits it. */
export async function drivers(options: DriversOptions, streams: Streams): Promise<ExitCode> {
  const { try: driver, match, connection, write, json = false } = options;
  if (driver !== undefined && match !== undefined)
    throw new TrialUsageError('--try and --match are two things');
  if ((driver === undefined) !== (connection === undefined)) {
    throw new TrialUsageError('--try needs --connection, and --connection needs --try');
  }
  if (driver === undefined && (options.channel ?? write) !== undefined) {
    throw new TrialUsageError('--channel and --write go with --try');
  }
  if (driver !== undefined && connection !== undefined) {
    const { tryOut } = await import('./drivers-try.js');
    return tryOut({ driver, connection, channel: channelOf(options.channel), write, json }, streams);
  }
  if (match !== undefined) {
    const { matchOut } = await import('./drivers-match.js');
    return matchOut({ address: match, json }, streams);
  }
  return list(json, streams);
}

function channelOf(text: string | undefined): number | undefined {
  if (text === undefined || /^\d{1,4}$/.test(text)) return text === undefined ? text : Number(text);
  throw new TrialUsageError(`--channel needs the number of a channel, and not "${printable(text)}"`);
}

async function list(json: boolean, streams: Streams): Promise<ExitCode> {
  const names = await shippedNames(shipped.drivers);
  const found = await Promise.all(names.map(async (name) => (await readDriver(name, shelves)).value));
  if (json) {
    const listed = found.map(({ name, role, summary }) => ({ name, role, summary }));
    streams.stdout.write(jsonText({ format: 'railproof/drivers 1', drivers: listed } satisfies DriversJson));
  } else {
    const rows = found.map(({ name, role, summary }) => [name, role, printable(summary)]);
    const lines = fittedTable(rows, ['left', 'left', 'left'], streams.stdout.columns, '');
    streams.stdout.write(`${lines.join('\n')}\n`);
  }
  return exitCodes.conforms;
}
