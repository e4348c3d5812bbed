import { createHash } from 'node:crypto';
import {
  closeSync,
  existsSync,
  fsyncSync,
  mkdirSync,
  openSync,
  renameSync,
  rmSync,
  statSync,
  writeFileSync,
} from 'node:fs';
import { basename, dirname, join } from 'node:path';
import { RailproofError } from '../errors/railproof-error.js';
import { flushFolder } from './flush-folder.js';
import { RecordWriteError } from './record-error.js';
import type { RunHeader } from './run-header.js';

/** The files of one run. */
export interface RunFolder {
  readonly path: string;
  /** The last part of the path: the name of the run. */
  readonly name: string;
  readonly journal: string;
  readonly readings: string;
  readonly findings: string;
  /** What people look at, worked out of the rest. */
  readonly report: string;
  /** There only where the watchman had to act. */
  readonly watchman: string;
  /** The folder of what went over the lines; there only where that was asked for. */
  readonly trace: string;
}

export function runFolderAt(path: string): RunFolder {
  return {
    path,
    name: basename(path),
    journal: join(path, 'journal.jsonl'),
    readings: join(path, 'readings.csv'),
    findings: join(path, 'findings.json'),
    report: join(path, 'report.html'),
    watchman: join(path, 'watchman.json'),
    trace: join(path, 'trace'),
  };
}

/**
 * Makes `<runs>/<UTC time>-<module>-<procedure>/`; a number is added when two runs begin in one second.
 * @throws RecordWriteError
 */
export function makeRunFolder(runs: string, began: Date, module: string, procedure: string): RunFolder {
  const time = began.toISOString().replace(/[-:]/g, '').replace(/\.\d+/, '');
  const wanted = join(runs, `${time}-${module}-${procedure}`);
  try {
    makeFolders(runs);
  } catch (cause) {
    throw new RecordWriteError(runs, cause);
  }
  for (let attempt = 1; ; attempt += 1) {
    const path = attempt === 1 ? wanted : `${wanted}-${attempt}`;
    try {
      mkdirSync(path);
      flushFolder(runs);
      return runFolderAt(path);
    } catch (cause) {
      if ((cause as NodeJS.ErrnoException).code !== 'EEXIST' || attempt > 999)
        throw new RecordWriteError(path, cause);
    }
  }
}

/**
 * A folder and those above it that are missing, one at a time: below a folder where none can be made
 * (`/proc`), Node's own recursive way never comes back.
 */
function makeFolders(path: string): void {
  try {
    mkdirSync(path);
  } catch (cause) {
    const { code } = cause as NodeJS.ErrnoException;
    if (code === 'EEXIST' && statSync(path).isDirectory()) return;
    if (code !== 'ENOENT' || existsSync(dirname(path)) || dirname(path) === path) throw cause;
    makeFolders(dirname(path));
    mkdirSync(path);
  }
}

/** Writes run.json and flushes it; hands over its SHA-256, for the journal to begin with. @throws RecordWriteError */
export function writeHeader(folder: RunFolder, header: RunHeader): string {
  const path = join(folder.path, 'run.json');
  const text = JSON.stringify(header, null, 2) + '\n';
  try {
    const file = openSync(path, 'wx');
    try {
      writeFileSync(file, text);
      fsyncSync(file);
    } finally {
      closeSync(file);
    }
    return createHash('sha256').update(text).digest('hex');
  } catch (cause) {
    throw new RecordWriteError(path, cause);
  }
}

/**
 * Writes a file of the record that can be made again, so that no reader ever sees half of it.
 * @throws RecordWriteError
 */
export function replaceFile(path: string, text: string): void {
  replaceFileBy(path, (file) => {
    writeFileSync(file, text);
  });
}

/**
 * The same for one that is written bit by bit; `write` is given the file's descriptor.
 * @throws RecordWriteError; whatever else `write` throws that has to do with another file
 */
export function replaceFileBy(path: string, write: (file: number) => void): void {
  const unfinished = `${path}.new`;
  try {
    const file = openSync(unfinished, 'w');
    try {
      write(file);
    } finally {
      closeSync(file);
    }
    renameSync(unfinished, path);
  } catch (cause) {
    discard(unfinished);
    throw cause instanceof RailproofError ? cause : new RecordWriteError(path, cause);
  }
}

/** What is left of a failed attempt only takes space; that it can't be removed is no news then. */
function discard(path: string): void {
  try {
    rmSync(path, { force: true });
  } catch {
    // The error that is under way says what is wrong with this place.
  }
}
