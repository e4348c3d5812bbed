import { Connections } from '../bench/connections.js';
import { FoundOnError } from '../bench/found-on.js';
import { type BenchParts, type OpenBench, openBench } from '../bench/open-bench.js';
import type { Connect } from '../instrument/connect.js';
import { StoppedByOperator } from '../run/stopped.js';
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
    if (!parts.signal.aborted || error instanceof FoundOnError) throw error;
    throw error === parts.signal.reason || hurry.aborted ? beforeItWasOpen(parts.signal.reason) : error;
  }
  if (hurry.aborted) await opened.cut();
  return opened;
}

/** Whoever was told that the bench is being made safe must hear that there was nothing to do. */
function beforeItWasOpen(reason: unknown): unknown {
  return reason instanceof StoppedByOperator
    ? new StoppedByOperator(reason.message, {
        advice: 'This run switched nothing on, and has no record: the bench was not open yet.',
        cause: reason,
      })
    : reason;
}
