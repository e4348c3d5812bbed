import { loadMayStillBeOn, sourceMayStillBeOn } from '../bench/make-safe.js';
import { realClock } from '../clock/real-clock.js';
import { VirtualClock } from '../clock/virtual-clock.js';
import { exitCodeOf, exitCodes, type ExitCode } from '../errors/railproof-error.js';
import { parseAddress } from '../files/connection-address.js';
import type { Driver } from '../files/driver.js';
import { readDriver } from '../files/read-driver.js';
import type { TraceEntry } from '../instrument/dialogue-record.js';
import type { Switching } from '../instrument/trial-switching.js';
import { type Trial, tryDriver, type TrialResult } from '../instrument/trial.js';
import { printable } from '../quantity/printable.js';
import { StoppedByOperator } from '../run/stopped.js';
import { TerminalOperator } from '../run/terminal-operator.js';
import { connectors } from './connectors.js';
import { atDriverLine, driverLine } from './driver-line.js';
import { errorText } from './error-text.js';
import { say } from './say.js';
import { stopOnSignals } from './stop-signals.js';
import type { Streams } from './streams.js';
import { countLine, meetingText, paceText, resultText, trialAsJson } from './trial-shown.js';
import { TrialUsageError } from './trial-usage.js';
import { trialFiles, writeAdapted, writeDialogue } from './trial-written.js';
import { whenAborted } from './when-aborted.js';
import { shelves } from './shipped.js';

export interface TryWanted {
  readonly driver: string;
  readonly connection: string;
  readonly channel?: number | undefined;
  /** What the adapted driver and the recorded dialogue are to be called. */
  readonly write?: string | undefined;
  readonly json: boolean;
}

/** `railproof drivers --try`: walks through a driver against an instrument, and keeps what came of it. */
export async function tryOut(wanted: TryWanted, streams: Streams): Promise<ExitCode> {
  const { json } = wanted;
  const file = await readDriver(wanted.driver, shelves);
  const driver = file.value;
  requireChannel(driver, wanted.channel);
  const files = wanted.write === undefined ? undefined : trialFiles(wanted.write);
  const address = parseAddress(wanted.connection);
  // What was recorded took its time then.
  const clock = address.kind === 'replay' ? new VirtualClock(realClock.wall()) : realClock;
  const connection = await connectors(clock)(address, driver, driver.role);
  const show = (text: string): void => {
    if (!json) streams.stdout.write(text);
  };
  const results: TrialResult[] = [];
  const entries: TraceEntry[] = [];
  const written: string[] = [];
  let trial: Partial<Trial> = {};
  const stop = stopOnSignals(streams);
  whenAborted(stop.hurry, () => void connection.close());
  let ending: Ending = { how: 'as-it-should' };
  try {
    if (!json) streams.stderr.write(`${driver.name} at ${printable(connection.address)}\n`);
    const done = await tryDriver({
      ...{ driver, channel: wanted.channel, connection, clock, signal: stop.signal },
      agree: (switching) => agree(switching, streams, stop),
      trace: (entry) => entries.push(entry),
      onMeeting: (meeting) => {
        trial = { meeting };
        show(meetingText(meeting));
      },
      onResult: (result) => {
        results.push(result);
        const place = driverLine(result.at, [file]);
        show(`${resultText(result, streams.stdout.columns, place)}\n`);
      },
      onPace: () => {
        if (json) return;
        streams.stderr.write('Finding out how fast it may be spoken to; this may take a minute.\n');
      },
    });
    trial = done;
    if (done.pace && done.proposal) show(paceText(driver, done.pace, done.proposal, streams.stdout.columns));
    if (files && done.meeting.kind === 'answered') {
      await writeAdapted(files, file, { address: connection.address, trial: done });
      written.push(files.driver);
    }
    if (stop.signal.aborted) ending = { how: 'stopped', error: stop.signal.reason };
  } catch (error) {
    ending = {
      how: 'broken-off',
      error: stop.signal.aborted ? stop.signal.reason : atDriverLine(error, [file]),
    };
  } finally {
    await connection.close();
    stop.release();
  }
  if (files) {
    await writeDialogue(files, connection.address, entries);
    written.push(files.dialogue);
  }
  streams.stdout.write(json ? trialAsJson(driver, results, trial, written) : countLine(results));
  for (const path of written) show(`written: ${printable(path)}\n`);
  return tell(driver, results, ending, streams);
}

type Ending =
  { readonly how: 'as-it-should' } | { readonly how: 'stopped' | 'broken-off'; readonly error: unknown };

/** Whoever sits at a terminal is asked; nobody else can say what is on the terminals of the instrument. */
async function agree(
  { question }: Switching,
  streams: Streams,
  stop: ReturnType<typeof stopOnSignals>,
): Promise<boolean> {
  const { stdin: input, stderr: output } = streams;
  const operator = new TerminalOperator({ input, output, yes: false, interrupted: stop.wish });
  if (!operator.present) return false;
  const text = `\n${question}\nType yes to try it; anything else leaves it out.\n> `;
  return operator.typesYes(text, stop.signal).catch((error: unknown) => {
    // Whoever says no more has not said yes; the trial ends as it should, with what it has come to.
    if (error instanceof StoppedByOperator) return false;
    throw error;
  });
}

function requireChannel({ name, channels }: Driver, channel: number | undefined): void {
  if (channel === undefined) return;
  if (channels === undefined) throw new TrialUsageError(`${name} has no channels; leave --channel out`);
  if (channel >= channels.first && channel <= channels.last) return;
  throw new TrialUsageError(`the channels of ${name} are ${channels.first} to ${channels.last}`);
}

/** The last words are how what could be on was left. */
function tell(
  driver: Driver,
  results: readonly TrialResult[],
  ending: Ending,
  { stderr }: Streams,
): ExitCode {
  if (ending.how !== 'as-it-should') say(stderr, errorText(ending.error));
  const proof = results.findLast(({ part }) => part === 'proof');
  const off = ending.how !== 'broken-off' && proof?.verdict === 'understood';
  const mayBeOn = { load: loadMayStillBeOn, source: sourceMayStillBeOn }[driver.role as string];
  if (mayBeOn !== undefined) {
    const lastWords = off ? `The ${driver.role} is off; it was read back.` : mayBeOn;
    say(stderr, lastWords);
  }
  if (ending.how !== 'as-it-should') return exitCodeOf(ending.error);
  if (mayBeOn !== undefined && !off) return exitCodes.instrument;
  return results.some(({ verdict }) => verdict === 'refused' || verdict === 'silent')
    ? exitCodes.doesNotConform
    : exitCodes.conforms;
}
