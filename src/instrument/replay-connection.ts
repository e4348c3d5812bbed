import { constants } from 'node:fs';
import { open, type FileHandle } from 'node:fs/promises';
import type { Clock } from '../clock/clock.js';
import type { ConnectionAddress } from '../files/bench.js';
import { formatAddress } from '../files/connection-address.js';
import type { Seconds } from '../quantity/quantity.js';
import type { Connection } from './connection.js';
import { readDialogueHeader, readDialogueLine, type TraceEntry } from './dialogue-record.js';
import { DialogueFileError, ReplayMismatchError } from './replay-errors.js';
import { visible } from './visible.js';

export type ReplayAddress = Extract<ConnectionAddress, { kind: 'replay' }>;

const largest = 256 * 1024 * 1024;
/** The clocks of recording and replay agree to rounding, no better. */
const rounding: Seconds = 1e-9;

/**
 * A recorded dialogue in the place of an instrument: it answers as it did then, and what it is told must be,
 * byte for byte, what was sent then. The file is read as the dialogue goes on. Time passes on the clock as
 * it passed then: a virtual clock makes it a moment.
 * @throws DialogueFileError when there is no such file, or it is too large, or not in the format.
 */
export async function openReplay(address: ReplayAddress, clock: Clock): Promise<Connection> {
  const { file } = address;
  // Not blocking: else the opening of a pipe waits for somebody to write to it.
  const handle = await open(file, constants.O_RDONLY | constants.O_NONBLOCK).catch((cause: unknown) => {
    const missing = (cause as NodeJS.ErrnoException).code === 'ENOENT';
    throw new DialogueFileError({
      file,
      reason: missing ? 'no such file' : 'it cannot be read',
      missing,
      cause,
    });
  });
  try {
    const found = await handle.stat();
    if (!found.isFile()) throw new DialogueFileError({ file, reason: 'it is no file' });
    if (found.size > largest) throw new DialogueFileError({ file, reason: `larger than ${largest} bytes` });
    const lines = handle.readLines()[Symbol.asyncIterator]();
    const first = await nextLine(lines, file, 1);
    if (first === undefined || readDialogueHeader(first) === undefined) {
      throw new DialogueFileError({ file, line: 1, reason: 'not a recorded dialogue' });
    }
    return new ReplayConnection(formatAddress(address), file, handle, lines, clock);
  } catch (error) {
    await handle.close().catch(() => undefined);
    throw error;
  }
}

class ReplayConnection implements Connection {
  readonly address: string;
  readonly #file: string;
  readonly #handle: FileHandle;
  readonly #lines: AsyncIterator<string, unknown>;
  readonly #clock: Clock;
  #lineNumber = 1;
  /** The recorded time that has been reached. */
  #reached: Seconds = 0;
  #next: TraceEntry | 'end' | undefined;
  #closed: Promise<void> | undefined;

  constructor(
    address: string,
    file: string,
    handle: FileHandle,
    lines: AsyncIterator<string, unknown>,
    clock: Clock,
  ) {
    this.address = address;
    this.#file = file;
    this.#handle = handle;
    this.#lines = lines;
    this.#clock = clock;
  }

  async write(bytes: Uint8Array): Promise<void> {
    const next = await this.#peek();
    if (next === 'end' || next.direction === 'received' || !Buffer.from(bytes).equals(next.bytes)) {
      throw new ReplayMismatchError({
        file: this.#file,
        line: this.#lineNumber,
        expected: next === 'end' ? 'come to its end' : `"${visible(next.bytes)}" ${next.direction}`,
        found: `"${visible(bytes)}"`,
      });
    }
    this.#pass(next);
  }

  async receive(within: Seconds): Promise<Uint8Array | undefined> {
    const next = await this.#peek();
    const isReply = next !== 'end' && next.direction === 'received';
    // Without waiting: what was found then, between two messages, is found now, however long that took.
    const inTime = isReply && (within <= 0 || next.t <= this.#reached + within + rounding);
    if (!inTime) {
      this.#reached += Math.max(0, within);
      await this.#clock.sleep(within);
      return undefined;
    }
    if (within > 0) await this.#clock.sleep(Math.max(0, next.t - this.#reached));
    this.#pass(next);
    return next.bytes;
  }

  close(): Promise<void> {
    this.#closed ??= this.#finish();
    return this.#closed;
  }

  async #finish(): Promise<void> {
    this.#next = 'end';
    await this.#lines.return?.();
    await this.#handle.close().catch(() => undefined);
  }

  #pass(entry: TraceEntry): void {
    this.#reached = Math.max(this.#reached, entry.t);
    this.#next = undefined;
  }

  async #peek(): Promise<TraceEntry | 'end'> {
    this.#next ??= await this.#read();
    return this.#next;
  }

  async #read(): Promise<TraceEntry | 'end'> {
    let line: string | undefined;
    do {
      this.#lineNumber++;
      line = await nextLine(this.#lines, this.#file, this.#lineNumber);
    } while (line?.trim() === '');
    if (line === undefined) return 'end';
    const entry = readDialogueLine(line);
    if (entry === undefined) {
      throw new DialogueFileError({
        file: this.#file,
        line: this.#lineNumber,
        reason: `"${visible(line)}" is not a line of a recorded dialogue`,
      });
    }
    return entry;
  }
}

async function nextLine(
  lines: AsyncIterator<string, unknown>,
  file: string,
  line: number,
): Promise<string | undefined> {
  try {
    const next = await lines.next();
    return next.done === true ? undefined : next.value;
  } catch (cause) {
    throw new DialogueFileError({ file, line, reason: 'it cannot be read', cause });
  }
}
