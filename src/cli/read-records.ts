import { existsSync, realpathSync } from 'node:fs';
import { basename, join, resolve } from 'node:path';
import type { UnderstoodRecord } from '../arrangement/understood-record.js';
import { RailproofError } from '../errors/railproof-error.js';
import { endedHow, type Result } from '../report/result.js';
import { understand } from '../report/understand.js';
import { recordNames } from './record-names.js';

/** A record that can't be read, and why, in words. */
export interface UnreadableRecord {
  readonly run: string;
  readonly why: string;
}

/**
 * The records that were named, in their order, with what they show. The same folder named twice counts once:
 * a wildcard and a name may both have meant it.
 * @throws NoRecordError, BadRecordError
 */
export function readRecords(paths: readonly string[]): UnderstoodRecord[] {
  return onceEach(paths).map(readRecord);
}

/**
 * All records of a drawer: of each folder, the record that it is or those that it holds, by their names. One
 * that can't be read does not hide the others.
 * @throws NoRunsError where there is no such folder
 */
export function readDrawer(folders: readonly string[]): {
  readonly records: readonly UnderstoodRecord[];
  readonly unreadable: readonly UnreadableRecord[];
} {
  const records: UnderstoodRecord[] = [];
  const unreadable: UnreadableRecord[] = [];
  for (const path of onceEach(folders.flatMap(recordsOf))) {
    try {
      records.push(readRecord(path));
    } catch (error) {
      if (!(error instanceof RailproofError)) throw error;
      unreadable.push({ run: nameOf(path), why: error.message });
    }
  }
  return { records, unreadable };
}

function recordsOf(folder: string): readonly string[] {
  if (existsSync(join(folder, 'run.json'))) return [folder];
  return recordNames(folder).map((name) => join(folder, name));
}

/** One that is not there is left to whoever reads it. */
function onceEach(paths: readonly string[]): readonly string[] {
  const places = paths.map((path) => (existsSync(path) ? realpathSync(path) : path));
  return paths.filter((_, index) => places.indexOf(places[index] ?? '') === index);
}

function readRecord(path: string): UnderstoodRecord {
  const result = understand(path);
  const { header, findings, decisions } = result;
  return {
    run: nameOf(path),
    header,
    findings,
    state: stateOf(result),
    unmet: decisions
      .filter(({ outcome }) => outcome === 'does-not-conform')
      .map(({ finding, requirement }) => ({ finding, requirement })),
  };
}

/** Also of one that was named from inside, as `.`. */
function nameOf(path: string): string {
  return basename(resolve(path));
}

function stateOf(result: Result): UnderstoodRecord['state'] {
  if (result.integrity.kind === 'damaged') return 'damaged';
  const { how } = endedHow(result);
  switch (how) {
    case 'completed':
      return 'whole';
    case 'stopped':
    case 'failed':
      return 'stopped';
    case 'cut-off':
      return 'cut-off';
  }
}
