import { join } from 'node:path';
import { RailproofError } from '../errors/railproof-error.js';
import { findingsAsCsv, type RecordListed } from '../report/findings-csv.js';
import { understand } from '../report/understand.js';

/** The findings of all these records, worked out again from their journals; one that can't be read says why. */
export function runsAsCsv(folder: string, names: readonly string[]): string {
  return findingsAsCsv(names.map((name) => listedRecord(folder, name)));
}

function listedRecord(folder: string, name: string): RecordListed {
  try {
    return { kind: 'result', result: understand(join(folder, name)) };
  } catch (error) {
    if (!(error instanceof RailproofError)) throw error;
    return { kind: 'unreadable', run: name, why: error.message };
  }
}
