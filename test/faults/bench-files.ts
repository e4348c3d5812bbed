import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { root } from '../whole/railproof.js';
import type { Scene } from './moments.js';

/** How long the program waits for an answer, in milliseconds: short, and long enough for a busy machine. */
export const timeout = 2000;

export interface BenchFiles {
  /** To be served. */
  readonly simulated: string;
  readonly procedure: string;
}

/**
 * Writes what a cell runs: the nursery's bench with quick readings, the shipped drivers with a short timeout,
 * and with a make-safe that no other operation says, so that its moment is known.
 */
export function writeBenchFiles(folder: string, scene: Scene): BenchFiles {
  const load = changed(
    shipped('drivers/load-input-scpi.yaml'),
    ['timeout: 1 s', `timeout: ${timeout} ms`],
    ['make-safe: ["INP OFF"]', 'make-safe: ["INP 0", "CURR 0"]'],
  );
  const meter = changed(shipped('drivers/meter-read-scpi.yaml'), ['timeout: 3 s', `timeout: ${timeout} ms`]);
  const bench = changed(
    shipped('fixtures/benches/nursery-constant-current.yaml'),
    ['driver: load-input-scpi', 'driver: load.yaml'],
    ['driver: meter-read-scpi', 'driver: meter.yaml'],
    [
      'simulation:\n',
      'simulation:\n  instruments: { load: { reading-time: 2 ms }, meter: { reading-time: 2 ms } }\n',
    ],
  );
  const file = (name: string, text: string): string => {
    const path = join(folder, name);
    writeFileSync(path, text);
    return path;
  };
  file('load.yaml', load);
  file('meter.yaml', meter);
  return {
    simulated: file('simulated.yaml', bench),
    procedure: file('brisk.yaml', procedureOf(scene)),
  };
}

function procedureOf({ steps }: Scene): string {
  const lines = ['railproof: procedure 1', 'name: brisk', 'title: Brisk', 'steps:'];
  return [...lines, ...steps.map((step) => `  - ${step}`), ''].join('\n');
}

function shipped(path: string): string {
  return readFileSync(join(root, path), 'utf8');
}

function changed(text: string, ...changes: readonly (readonly [string, string])[]): string {
  return changes.reduce((before, [from, to]) => {
    if (!before.includes(from)) throw new Error(`"${from}" is no longer in the shipped file`);
    return before.replace(from, to);
  }, text);
}
