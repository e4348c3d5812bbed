import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, it } from 'vitest';
import { flushFolder } from '../../src/record/flush-folder.js';

it('flushing a folder never stands in the way, whether it is there or not', () => {
  const folder = mkdtempSync(join(tmpdir(), 'railproof-flush-'));
  expect(() => {
    flushFolder(folder);
  }).not.toThrow();
  rmSync(folder, { recursive: true });
  expect(() => {
    flushFolder(folder);
  }).not.toThrow();
});
