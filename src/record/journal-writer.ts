import { closeSync, fdatasyncSync, openSync, writeSync } from 'node:fs';
import type { Hash } from 'node:crypto';
import type { Seconds } from '../quantity/quantity.js';
import { sealedEvents, type JournalEvent } from './journal-event.js';
import { RecordWriteError } from './record-error.js';
import { newSealer, sealLine } from './seal.js';

/**
 * Appends to a journal. Writing is synchronous on purpose: when `append` returns, the line is with the
 * operating system and survives our death; after a sealed event it is on the disk and survives a power cut.
 */
export class JournalWriter {
  readonly #path: string;
  readonly #file: number;
  readonly #began: Seconds;
  readonly #now: () => Seconds;
  readonly #hash: Hash = newSealer();

  /** @throws RecordWriteError when the file is there already or can't be made. */
  constructor(path: string, now: () => Seconds) {
    this.#path = path;
    this.#now = now;
    this.#began = now();
    try {
      this.#file = openSync(path, 'ax');
    } catch (cause) {
      throw new RecordWriteError(path, cause);
    }
  }

  /** @throws RecordWriteError */
  append(event: JournalEvent): void {
    const t = Math.round((this.#now() - this.#began) * 1e6) / 1e6;
    const sealed = sealedEvents.has(event.event);
    const plain = JSON.stringify({ t, ...event });
    const line = (sealed ? sealLine(this.#hash, plain) : plain) + '\n';
    try {
      writeAll(this.#file, Buffer.from(line));
      if (sealed) fdatasyncSync(this.#file);
    } catch (cause) {
      throw new RecordWriteError(this.#path, cause);
    }
    this.#hash.update(line);
  }

  close(): void {
    closeSync(this.#file);
  }
}

function writeAll(file: number, bytes: Buffer): void {
  let written = 0;
  while (written < bytes.length) written += writeSync(file, bytes, written);
}
