import type { Clock } from '../clock/clock.js';
import type { ReplayAddress } from '../files/bench.js';
import { formatAddress } from '../files/connection-address.js';
import type { Seconds } from '../quantity/quantity.js';
import { ConnectionLostError, InstrumentUnreachableError, PortBusyError } from './connection-errors.js';
import type { Connection } from './connection.js';
import type { Lost, NotOpened, Opened, Received, TraceEntry } from './dialogue-record.js';
import { ReplayMismatchError } from './replay-errors.js';
import { ReplayTape } from './replay-tape.js';
import { ReplayTime } from './replay-time.js';
import { visible } from './visible.js';

/**
 * A way to recorded dialogues in the place of instruments: each answers as it did then, and what it is told
 * must be, byte for byte, what was sent then. Time passes on the clock as it passed then: a virtual clock makes
 * it a moment. A line that was lost then is lost again, and opened again goes on behind that place.
 * @throws DialogueFileError when there is no such file, or it is too large, or not in the format
 * @throws InstrumentUnreachableError, PortBusyError where that happened then, and when the recording holds no
 * further connection
 */
export function replays(clock: Clock): (address: ReplayAddress) => Promise<Connection> {
  const begun = new Map<string, Recording>();
  return async (address) => {
    const known = begun.get(address.file);
    const recording = known ?? { tape: new ReplayTape(address.file), time: new ReplayTime(clock) };
    const { tape } = recording;
    try {
      await tape.open();
      begun.set(address.file, recording);
      await openNext(formatAddress(address), recording, known !== undefined);
      return new ReplayConnection(formatAddress(address), recording);
    } catch (error) {
      await tape.close();
      throw error;
    }
  };
}

interface Recording {
  readonly tape: ReplayTape;
  readonly time: ReplayTime;
}

/** A recording that knows nothing of connections is one. */
async function openNext(address: string, { tape, time }: Recording, again: boolean): Promise<void> {
  const next = await tape.peek();
  if (next === 'end' || !isOpening(next)) {
    if (!again) return;
    throw new InstrumentUnreachableError({
      address,
      reason: 'the recording holds no further connection here',
      advice: `What comes next in it is line ${tape.line}. ${goesAnotherWay}`,
    });
  }
  time.begin(next.t);
  tape.pass();
  if (next.kind === 'unreachable') throw new InstrumentUnreachableError({ address, reason: next.reason });
  if (next.kind === 'busy') throw new PortBusyError({ address });
}

function isOpening(entry: TraceEntry): entry is Opened | NotOpened {
  return entry.kind === 'opened' || entry.kind === 'unreachable' || entry.kind === 'busy';
}

const goesAnotherWay =
  'A dialogue replays only with the procedure, the module and the driver it was recorded with.';

class ReplayConnection implements Connection {
  readonly address: string;
  readonly #tape: ReplayTape;
  readonly #time: ReplayTime;
  #lost: ConnectionLostError | undefined;
  #closed: Promise<void> | undefined;

  constructor(address: string, { tape, time }: Recording) {
    this.address = address;
    this.#tape = tape;
    this.#time = time;
  }

  async write(bytes: Uint8Array): Promise<Seconds> {
    const next = await this.#peek();
    if (next !== 'end' && next.kind === 'sent' && Buffer.from(bytes).equals(next.bytes)) {
      this.#time.reach(next.t);
      this.#tape.pass();
      return this.#onTheWay();
    }
    if (next !== 'end' && next.kind === 'lost') throw this.#lose(next);
    if (this.#lost !== undefined) throw this.#lost;
    const isEnd = next === 'end';
    throw new ReplayMismatchError({
      file: this.#tape.file,
      line: this.#tape.line,
      expected: inWords(next),
      found: `"${visible(bytes)}"`,
      advice: isEnd ? 'What was recorded ended here, or was cut off.' : goesAnotherWay,
    });
  }

  async receive(within: Seconds): Promise<Uint8Array | undefined> {
    const next = await this.#peek();
    if (next !== 'end' && next.kind === 'silent') {
      this.#tape.passSilence(next);
    } else if (next !== 'end' && isHeard(next) && this.#time.isWithin(next.t, within)) {
      await this.#time.waitUntil(next.t, within);
      if (next.kind === 'lost') throw this.#lose(next);
      this.#tape.pass();
      return next.bytes;
    } else if (this.#lost !== undefined) {
      throw this.#lost;
    }
    await this.#time.wait(within);
    return undefined;
  }

  async #onTheWay(): Promise<Seconds> {
    const next = await this.#peek();
    if (next === 'end' || next.kind !== 'out-in') return 0;
    this.#tape.pass();
    return next.seconds;
  }

  close(): Promise<void> {
    this.#closed ??= this.#tape.close();
    return this.#closed;
  }

  #peek(): Promise<TraceEntry | 'end'> {
    if (this.#closed === undefined) return this.#tape.peek();
    // Of two ends the first counts.
    throw this.#lost ?? new ConnectionLostError({ address: this.address, reason: 'it was closed here' });
  }

  #lose({ t, reason }: Lost): ConnectionLostError {
    this.#time.reach(t);
    this.#tape.pass();
    this.#lost = new ConnectionLostError({ address: this.address, reason });
    return this.#lost;
  }
}

function isHeard(entry: TraceEntry): entry is Received | Lost {
  return entry.kind === 'received' || entry.kind === 'lost';
}

function inWords(entry: TraceEntry | 'end'): string {
  if (entry === 'end') return 'come to its end';
  switch (entry.kind) {
    case 'sent':
    case 'received':
      return `"${visible(entry.bytes)}" ${entry.kind}`;
    case 'out-in':
      return 'the time until a message is out';
    case 'opened':
      return 'a new connection';
    case 'unreachable':
    case 'busy':
      return 'a connection that could not be opened';
    case 'lost':
      return 'the connection lost';
    case 'silent':
      return 'nothing received';
  }
}
