import { closeSync, fdatasyncSync, fstatSync, ftruncateSync, openSync, writeSync } from 'node:fs';
import { dirname } from 'node:path';
import type { Hash } from 'node:crypto';
import type { Seconds } from '../quantity/quantity.js';
import { flushFolder } from './flush-folder.js';
import { sealedEvents, type JournalEvent, type TimedEvent } from './journal-event.js';
import { RecordGoneError, RecordWriteError } from './record-error.js';
import { Reserve } from './reserve.js';
import { newSealer, sealLine } from './seal.js';

/**
 * Appends to a journal. Writing is synchronous on purpose: when `append` returns, the line is with the
 * operating system and survives our death; after a sealed event it is on the disk and survives a power cut.
 */
export class JournalWriter {
  readonly #path: string;
  readonly #file: number;
  /** Whether this file system tells when a file has lost its last name. */
  readonly #tellsNames: boolean;
  readonly #now: () => Seconds;
  #began: Seconds;
  readonly #hash: Hash = newSealer();
  /** Of whole lines. */
  #bytes = 0;
  readonly #flush: (file: number) => void;
  readonly #reserve: Reserve;
  /** Set when nothing that is written later could be relied on. */
  #failed: RecordWriteError | RecordGoneError | undefined;

  /**
   * `flush` brings what was written to the disk.
   * @throws RecordWriteError when the file is there already or can't be made.
   */
  constructor(path: string, now: () => Seconds, flush: (file: number) => void = fdatasyncSync) {
    this.#path = path;
    this.#now = now;
    this.#flush = flush;
    this.#began = now();
    try {
      this.#file = openSync(path, 'ax');
      this.#tellsNames = fstatSync(this.#file).nlink > 0;
      this.#reserve = new Reserve(`${path}.reserve`);
      flushFolder(dirname(path));
    } catch (cause) {
      throw new RecordWriteError(path, cause);
    }
  }

  /**
   * When a line can't be written whole, what was written of it is taken back and the reserve given up, so that
   * later ones (the end of the run) have room and stand on lines of their own. Where it says itself that the load
   * went off, or why the run ended, it is what the reserve is for, and is written there. Nothing comes after a
   * line that can't be taken back; nor after a flush that failed: the system may then have dropped what it could not write,
   * and the next flush would succeed all the same.
   * @throws RecordWriteError; RecordGoneError when the file was removed since the last sealed event
   */
  append(event: JournalEvent): void {
    const t = Math.round((this.#now() - this.#began) * 1e6) / 1e6;
    this.#write({ t, ...event }, { secured: sealedEvents.has(event.event) });
  }

  /**
   * Appends what another journal holds, with the time that it has there. It is on the disk after `goOnFrom` only:
   * what is copied can be copied again.
   * @throws RecordWriteError
   */
  copy(event: TimedEvent): void {
    this.#write(event, { secured: false });
  }

  /**
   * Brings what was copied to the disk. What is appended from now on happens at `t` and later.
   * @throws RecordWriteError, RecordGoneError
   */
  goOnFrom(t: Seconds): void {
    this.#secure();
    this.#began = this.#now() - t;
  }

  #write(event: TimedEvent, { secured }: { readonly secured: boolean }): void {
    if (this.#failed !== undefined) throw this.#failed;
    const sealed = sealedEvents.has(event.event);
    const plain = JSON.stringify(event);
    const line = Buffer.from((sealed ? sealLine(this.#hash, plain) : plain) + '\n');
    const noRoom = this.#put(line);
    if (noRoom !== undefined && !(saysHowItWasLeft(event) && this.#fitsNow(line))) throw noRoom;
    if (secured) this.#secure();
    this.#hash.update(line);
    this.#bytes += line.length;
    // It is in the reserve: nothing but the end may follow it.
    if (noRoom !== undefined && event.event !== 'ended') throw noRoom;
  }

  /** The whole line, or nothing of it; then the reserve is given up, and why there was no room comes back. */
  #put(line: Buffer): RecordWriteError | undefined {
    try {
      writeAll(this.#file, line);
      return undefined;
    } catch (cause) {
      const error = new RecordWriteError(this.#path, cause);
      if (!this.#takeBack()) this.#failed = error;
      this.#reserve.giveUp();
      return error;
    }
  }

  /** Into what the reserve has left free. */
  #fitsNow(line: Buffer): boolean {
    return this.#failed === undefined && this.#put(line) === undefined;
  }

  /** On the disk, and in a file that still has a name there. */
  #secure(): void {
    try {
      this.#flush(this.#file);
    } catch (cause) {
      this.#failed = new RecordWriteError(this.#path, cause);
      this.#takeBack();
      throw this.#failed;
    }
    if (!this.#tellsNames || fstatSync(this.#file).nlink > 0) return;
    this.#failed = new RecordGoneError(this.#path);
    throw this.#failed;
  }

  #takeBack(): boolean {
    try {
      ftruncateSync(this.#file, this.#bytes);
      return true;
    } catch {
      return false;
    }
  }

  close(): void {
    this.#reserve.giveUp();
    closeSync(this.#file);
  }
}

function saysHowItWasLeft(event: TimedEvent): boolean {
  return event.event === 'ended' || (event.event === 'input' && event.state === 'off');
}

function writeAll(file: number, bytes: Buffer): void {
  let written = 0;
  while (written < bytes.length) written += writeSync(file, bytes, written);
}
