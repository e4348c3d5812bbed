import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it, onTestFinished } from 'vitest';
import { withAddresses } from '../../src/files/live-bench.js';
import { instrument } from '../whole/instruments.js';
import { railproof } from './in-process.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-hostile-instrument-'));
const runs = join(folder, 'runs');
afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

const escapes = '\x1b[2J\x1b]0;owned\x07\x9b31m\r';

const manners: Readonly<Record<string, (line: string) => string>> = {
  'escapes in its identity': () => `NURSERY,${escapes},1,1`,
  'a line of 64 KiB': () => 'x'.repeat(65_000) + escapes,
  'a line without an end': () => escapes.repeat(20_000),
  'a number for everything': () => '9.91E37',
  'escapes in its error queue': (line) =>
    line === '*IDN?' ? 'NURSERY,LOAD,1,1' : line === 'SYST:ERR?' ? `-113,"${escapes}"` : `0${escapes}`,
  'bytes of every kind': (line) =>
    line === '*IDN?'
      ? 'NURSERY,LOAD,1,1'
      : Buffer.from(Array.from({ length: 256 }, (_, byte) => byte)).toString('latin1'),
};

/** A load that answers every question in its own manner; it says that it is off when it is asked in earnest. */
async function hostile(manner: string): Promise<string> {
  const reply = manners[manner] ?? ((): string => '');
  const load = await instrument((line, socket) => {
    if (!line.endsWith('?')) return;
    socket.write(Buffer.from(reply(line) + (manner === 'a line without an end' ? '' : '\n'), 'latin1'));
  });
  onTestFinished(() => load.close());
  return load.address;
}

function benchAt(address: string): string {
  const nursery = readFileSync('fixtures/benches/nursery.yaml', 'utf8');
  const text = withAddresses(nursery, { load: address, meter: address });
  const path = join(folder, 'bench.yaml');
  writeFileSync(path, text);
  return path;
}

describe('an instrument that tries to steer the terminal', { timeout: 120_000 }, () => {
  it.each(
    Object.keys(manners).flatMap((manner) =>
      ['run', 'safe', 'drivers'].map((command) => [manner, command] as const),
    ),
  )('with %s is refused by %s in words that can be shown, and nothing is begun', async (manner, command) => {
    const address = await hostile(manner);
    const bench = benchAt(address);
    const args = {
      run: ['quick-look', '--bench', bench, '--module', 'fixtures/modules/K1.yaml', '--runs', runs, '--yes'],
      safe: ['--bench', bench],
      drivers: ['--try', 'load-input-scpi', '--connection', address],
    }[command];
    const { status, stdout, stderr } = await railproof(command, ...(args ?? []));
    expect(status).toBe(69);
    for (const text of [stdout, stderr]) {
      expect(text.replaceAll('\n', '')).not.toMatch(/[\p{Cc}\p{Cf}\p{Cs}\u2028\u2029]/u);
      for (const line of text.split('\n')) expect(line.length).toBeLessThan(1500);
    }
    expect(stderr).toContain(command === 'run' ? address : 'THE LOAD MAY STILL BE ON');
  });

  it('leaves no record', () => {
    expect(() => readdirSync(runs)).toThrow(/ENOENT/);
  });
});
