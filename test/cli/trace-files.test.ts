import { existsSync, mkdirSync, mkdtempSync, readFileSync, rmSync, symlinkSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { TraceFiles } from '../../src/cli/trace-files.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-trace-'));
const sent = (text: string) => ({ t: 0.5, kind: 'sent', bytes: Buffer.from(text) }) as const;

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

/** In a folder that is made for it, with what was told of it. */
function keeping(): { files: TraceFiles; told: string[]; trace: string; make: () => string } {
  const told: string[] = [];
  const trace = join(mkdtempSync(join(folder, 'run-')), 'trace');
  const make = (): string => {
    mkdirSync(trace);
    return trace;
  };
  return { files: new TraceFiles((text) => told.push(text)), told, trace, make };
}

describe('the files of a trace', () => {
  it('hold what was noted before there was a folder, and each line at once from then on', () => {
    const { files, told, trace, make } = keeping();
    const load = files.of('load', 'tcp://there:1');
    load(sent('*IDN?\n'));
    files.keepIn(make, () => ({ 'replay.yaml': 'railproof: bench 1\n' }));
    const lines =
      '{"format":"railproof/dialogue 1","address":"tcp://there:1"}\n{"t":0.5,"sent":"*IDN?\\n"}\n';
    expect(readFileSync(join(trace, 'load.jsonl'), 'utf8')).toBe(lines);
    // A line that is found again has no second heading.
    files.of('load', 'tcp://there:1')(sent('ä'));
    expect(readFileSync(join(trace, 'load.jsonl'), 'latin1')).toContain('"sent":"Ã\x83Â¤"');
    files.answer({ t: 1, asked: 'case', answered: 'done' });
    expect(readFileSync(join(trace, 'operator.jsonl'), 'utf8').split('\n')).toEqual([
      '{"format":"railproof/answers 1"}',
      '{"t":1,"asked":"case","answered":"done"}',
      '',
    ]);
    expect(readFileSync(join(trace, 'replay.yaml'), 'utf8')).toBe('railproof: bench 1\n');
    files.close();
    load(sent('too late'));
    expect(readFileSync(join(trace, 'load.jsonl'), 'utf8')).not.toContain('too late');
    expect(told).toEqual([]);
  });

  it('are given up and removed when they can be written no more, and told of once', () => {
    const { files, told, trace } = keeping();
    const make = (): string => {
      mkdirSync(trace);
      symlinkSync('/dev/full', join(trace, 'load.jsonl'));
      return trace;
    };
    files.keepIn(make, () => ({}));
    const meter = files.of('meter', 'tcp://there:2');
    meter(sent('READ?\n'));
    expect(told).toEqual([]);
    files.of('load', 'tcp://there:1')(sent('INP?\n'));
    expect(told).toHaveLength(1);
    expect(told[0]).toMatch(/^the trace is given up and removed, .*ENOSPC/);
    meter(sent('READ?\n'));
    files.keepIn(make, () => ({}));
    expect(told).toHaveLength(1);
    expect(existsSync(trace)).toBe(false);
    expect(existsSync('/dev/full')).toBe(true);
    expect(files.folder).toBeUndefined();
  });

  it('are given up, too, where an instrument talks without end before the run begins', () => {
    const { files, told, trace, make } = keeping();
    const load = files.of('load', 'tcp://there:1');
    const much = { t: 0, kind: 'received', bytes: Buffer.alloc(1024 * 1024, 'x') } as const;
    for (let count = 0; count < 20; count++) load(much);
    files.keepIn(make, () => ({}));
    expect(told).toHaveLength(1);
    expect(told[0]).toContain('before the run began');
    expect(existsSync(trace)).toBe(false);
  });
});
