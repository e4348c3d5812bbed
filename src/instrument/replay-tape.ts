import { constants } from 'node:fs';
import { open, type FileHandle } from 'node:fs/promises';
import { readDialogueHeader, readDialogueLine, type Silent, type TraceEntry } from './dialogue-record.js';
import { DialogueFileError } from './replay-errors.js';
import { visible } from './visible.js';

const largest = 256 * 1024 * 1024;

/**
 * A recorded dialogue and how far it has been played. It is read as it is played, and remembers its place: a
 * connection that is opened anew goes on where the one before it ended.
 */
export class ReplayTape {
  readonly file: string;
  #handle: FileHandle | undefined;
  #lines: AsyncIterator<string, unknown> | undefined;
  /** Of the last line that was read. */
  #line = 0;
  #next: TraceEntry | 'end' | undefined;

  constructor(file: string) {
    this.file = file;
  }

  /** Of the entry that comes next. */
  get line(): number {
    return this.#line;
  }

  /** @throws DialogueFileError when there is no such file, or it is too large, or not in the format. */
  async open(): Promise<void> {
    await this.close();
    this.#handle = await openFile(this.file);
    this.#lines = this.#handle.readLines()[Symbol.asyncIterator]();
    const first = await this.#readLine(1);
    if (first === undefined || readDialogueHeader(first) === undefined) {
      throw new DialogueFileError({ file: this.file, line: 1, reason: 'not a recorded dialogue' });
    }
    for (let line = 2; line <= this.#line; line++) await this.#readLine(line);
    this.#line = Math.max(1, this.#line);
  }

  /** Never rejects. */
  async close(): Promise<void> {
    await this.#lines?.return?.();
    await this.#handle?.close().catch(() => undefined);
    this.#lines = this.#handle = undefined;
  }

  /** @throws DialogueFileError */
  async peek(): Promise<TraceEntry | 'end'> {
    this.#next ??= await this.#read();
    return this.#next;
  }

  pass(): void {
    this.#next = undefined;
  }

  /** One of the times that nothing had come. */
  passSilence(entry: Silent): void {
    this.#next = entry.times > 1 ? { ...entry, times: entry.times - 1 } : undefined;
  }

  async #read(): Promise<TraceEntry | 'end'> {
    let line: string | undefined;
    do {
      this.#line++;
      line = await this.#readLine(this.#line);
    } while (line?.trim() === '');
    if (line === undefined) return 'end';
    const entry = readDialogueLine(line);
    if (entry !== undefined) return entry;
    const isLast = (await this.#readLine(this.#line + 1)) === undefined;
    throw new DialogueFileError({
      file: this.file,
      line: this.#line,
      reason: `"${visible(line)}" is not a line of a recorded dialogue${isLast ? '; was it cut off here?' : ''}`,
    });
  }

  async #readLine(line: number): Promise<string | undefined> {
    try {
      const next = await this.#lines?.next();
      return next === undefined || next.done === true ? undefined : next.value;
    } catch (cause) {
      throw new DialogueFileError({ file: this.file, line, reason: 'it cannot be read', cause });
    }
  }
}

async function openFile(file: string): Promise<FileHandle> {
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
    return handle;
  } catch (error) {
    await handle.close().catch(() => undefined);
    throw error;
  }
}
