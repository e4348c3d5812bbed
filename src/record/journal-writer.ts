import { closeSync, fdatasyncSync, ftruncateSync, openSync, writeSync } from 'node:fs';
import { dirname } from 'node:path';
import type { Hash } from 'node:crypto';
import type { Seconds } from '../quantity/quantity.js';
import { flushFolder } from './flush-folder.js';
import { sealedEvents, type JournalEvent, type TimedEvent } from './journal-event.js';
import { RecordWriteError } from './record-error.js';
import { newSealer, sealLine } from './seal.js';

/**
 * Appends to a journal. Writing is synchronous on purpose: when `append` returns, the line is with the
 * operating system and survives our death; after a sealed event it is on the disk and survives a power cut.
 */
export class JournalWriter {
  readonly #path: string;
  readonly #file: number;
  readonly #now: () => Seconds;
  #began: Seconds;
  readonly #hash: Hash = newSealer();
  /** Of whole lines. */
  #bytes = 0;
  /** Set when a torn line could not be taken back: what came after it would be joined to it. */
  #torn: RecordWriteError | undefined;

  /** @throws RecordWriteError when the file is there already or can't be made. */
  constructor(path: string, now: () => Seconds) {
    this.#path = path;
    this.#now = now;
    this.#began = now();
    try {
      this.#file = openSync(path, 'ax');
      flushFolder(dirname(path));
    } catch (cause) {
      throw new RecordWriteError(path, cause);
    }
  }

  /**
   * When a line can't be written whole, what was written of it is taken back, so that a later one (the end of
   * the run, where there is room again) stands on a line of its own.
   * @throws RecordWriteError
   */
  append(event: JournalEvent): void {
    const t = Math.round((this.#now() - this.#began) * 1e6) / 1e6;
    this.#write({ t, ...event }, { flush: sealedEvents.has(event.event) });
  }

  /**
   * Appends what another journal holds, with the time that it has there. It is on the disk after `goOnFrom` only:
   * what is copied can be copied again.
   * @throws RecordWriteError
   */
  copy(event: TimedEvent): void {
    this.#write(event, { flush: false });
  }

  /**
   * Flushes what was copied to the disk. What is appended from now on happens at `t` and later.
   * @throws RecordWriteError
   */
  goOnFrom(t: Seconds): void {
    try {
      fdatasyncSync(this.#file);
    } catch (cause) {
      throw new RecordWriteError(this.#path, cause);
    }
    this.#began = this.#now() - t;
  }

  #write(event: TimedEvent, { flush }: { readonly flush: boolean }): void {
    if (this.#torn !== undefined) throw this.#torn;
    const plain = JSON.stringify(event);
    const sealed = sealedEvents.has(event.event);
    const line = Buffer.from((sealed ? sealLine(this.#hash, plain) : plain) + '\n');
    try {
      writeAll(this.#file, line);
      if (flush) fdatasyncSync(this.#file);
    } catch (cause) {
      const error = new RecordWriteError(this.#path, cause);
      this.#takeBack(error);
      throw error;
    }
    this.#hash.update(line);
    this.#bytes += line.length;
  }

  #takeBack(error: RecordWriteError): void {
    try {
      ftruncateSync(this.#file, this.#bytes);
    } catch {
      this.#torn = error;
    }
  }

  close(): void {
    closeSync(this.#file);
  }
}

function writeAll(file: number, bytes: Buffer): void {
  let written = 0;
  while (written < bytes.length) written += writeSync(file, bytes, written);
}
