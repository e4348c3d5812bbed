import { mkdirSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, it } from 'vitest';
import { type CellWanted, runCell } from './cell.js';
import { keepsItsPromise } from './checks.js';
import { type FaultName, faults } from './faults.js';
import { moments } from './moments.js';

/** A cell takes some seconds by itself, and several share the machine with all else. */
const cellTimeout = 150_000;

/**
 * Those akin to another are taken over one line, or not at all, in the ordinary run; RAILPROOF_FAULTS=all takes
 * every one over both.
 */
const seldom: Partial<Record<FaultName, CellWanted['lines'] | 'neither'>> = {
  missing: 'neither',
  overload: 'neither',
  garbled: 'pty',
  'meter-dropped': 'tcp',
  'meter-gone': 'pty',
};

function isTaken(fault: FaultName, lines: CellWanted['lines']): boolean {
  return process.env['RAILPROOF_FAULTS'] === 'all' || (seldom[fault] ?? lines) === lines;
}

/**
 * Every fault at every moment, each on a bench of its own and with the program in a process of its own. What
 * must come of each stands in `promises.ts`.
 */
export function matrix(lines: CellWanted['lines']): void {
  const folder = mkdtempSync(join(tmpdir(), `railproof-faults-${lines}-`));
  afterAll(() => {
    rmSync(folder, { recursive: true, force: true });
  });
  const taken = (Object.keys(faults) as FaultName[]).filter((fault) => isTaken(fault, lines));
  // One fault after the other at each moment, so that those that wait long do not wait side by side.
  describe.concurrent.each(moments)('at %s', { timeout: cellTimeout }, (moment) => {
    it.for(taken)('%s', async (fault, { expect, skip }) => {
      const own = join(folder, `${fault}-${moment}`);
      mkdirSync(own);
      const cell = await runCell({ fault, moment, lines, folder: own });
      if ('impossible' in cell) {
        expect(process.env['CI'], `a gate must not leave this out: ${cell.impossible}`).toBeUndefined();
        skip(cell.impossible);
      } else keepsItsPromise(expect, cell, fault, moment);
    });
  });
}
