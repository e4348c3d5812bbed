import { closeSync, fsyncSync, openSync, rmSync, writeFileSync } from 'node:fs';

/** A block or two of any disk; the last lines of a journal take less than one. */
const size = 8192;

/**
 * Room kept on the disk for the last lines of a journal: when the disk is full it is given up, so that the
 * record still says that the load went off, and why the run ended.
 */
export class Reserve {
  readonly #path: string;

  /** @throws what the file system says where there is no room for it either. */
  constructor(path: string) {
    this.#path = path;
    const file = openSync(path, 'w');
    try {
      writeFileSync(file, Buffer.alloc(size));
      fsyncSync(file);
    } catch (error) {
      this.giveUp();
      throw error;
    } finally {
      closeSync(file);
    }
  }

  /** Never throws; a second time is of no effect. */
  giveUp(): void {
    try {
      rmSync(this.#path, { force: true });
    } catch {
      // Then the journal ends where it was full.
    }
  }
}
