import { Connections } from '../bench/connections.js';
import { FoundOnError } from '../bench/found-on.js';
import { type BenchParts, type OpenBench, openBench } from '../bench/open-bench.js';
import type { Connect } from '../instrument/connect.js';
import { whenAborted } from './when-aborted.js';

/** Of a run: what aborts `signal` is why it ends, and `hurry` comes after it, from whoever won't wait for an answer. */
export interface RunParts extends BenchParts {
  readonly signal: AbortSignal;
  readonly hurry: AbortSignal;
}

/**
 * Opens a bench that is given up once somebody is in a hurry: also while it is being opened, when an instrument may
 * keep its first answer back for long. Nothing was switched on until then, so that there is nothing to make safe.
 * @throws as `openBench`; where it was given up meanwhile, why the run ends instead of how it showed
 */
export async function openForRun({ hurry, ...parts }: RunParts): Promise<OpenBench> {
  const connections = new Connections(parts.connect);
  let opened: OpenBench | undefined;
  const connect: Connect = async (...wanted) => {
    const connection = await connections.connect(...wanted);
    // Whatever is opened once there is a bench belongs to making it safe.
    if (opened === undefined && hurry.aborted) await connection.close();
    return connection;
  };
  whenAborted(hurry, () => void (opened === undefined ? connections.giveUp() : opened.cut()));
  try {
    opened = await openBench({ ...parts, connect });
  } catch (error) {
    if (hurry.aborted && parts.signal.aborted && !(error instanceof FoundOnError)) throw parts.signal.reason;
    throw error;
  }
  if (hurry.aborted) await opened.cut();
  return opened;
}
