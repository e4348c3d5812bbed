import { cpSync, mkdtempSync, readFileSync, rmSync, truncateSync, statSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { railproof } from './railproof.js';
import { happenings, onlyIn, replayed, shownBy, traced, type Traced } from './traced.js';

vi.setConfig({ testTimeout: 120_000, hookTimeout: 120_000 });

const folder = mkdtempSync(join(tmpdir(), 'railproof-replay-'));
const fresh = (): string => mkdtempSync(join(folder, 'runs-'));
const module = ['--module', 'fixtures/modules/K1.yaml'];

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

describe('a run made with --trace, replayed from its folder alone, shows the same to the last digit', () => {
  it.each([
    ['real-limit', 'nursery', ['load', 'meter', 'operator']],
    ['thermal-soak', 'nursery-soak', ['load', 'meter', 'thermometer', 'operator']],
    ['isolation', 'nursery-isolation', ['load', 'meter', 'operator']],
  ])('%s on the bench %s', { concurrent: true }, async (procedure, bench, posts) => {
    const then = await traced(fresh(), [procedure, '--bench', `fixtures/benches/${bench}.yaml`, ...module]);
    expect(then.stderr).toContain('The load is off; it was read back.');
    expect(then.status).toBe(0);
    const now = await replayed(then.trace, fresh(), ['--trace']);
    expect(now.stderr).toContain('The load is off; it was read back.');
    expect(now.status).toBe(0);
    const shown = shownBy(now.record);
    expect(shown).toEqual(shownBy(then.record));
    expect(shown.findings.length).toBeGreaterThan(1);
    for (const post of posts) {
      expect(happenings(join(now.record, 'trace'), post)).toEqual(happenings(then.trace, post));
    }
  });

  it('also one that goes on with a run that was broken off', async () => {
    const bench = join(folder, 'breaking.yaml');
    const nursery = readFileSync('fixtures/benches/nursery.yaml', 'utf8');
    writeFileSync(bench, `${nursery}  faults: [{ at: 30 s, what: meter-lost }]\n`);
    const broken = await traced(fresh(), ['real-limit', '--bench', bench, ...module]);
    expect(broken.status).toBe(69);
    const same = await replayed(broken.trace, fresh());
    expect(same.status).toBe(69);
    expect(shownBy(same.record)).toEqual(shownBy(broken.record));
    const meter = happenings(broken.trace, 'meter').join('\n');
    expect(meter.match(/"lost":"/g)).toHaveLength(1);
    expect(meter.match(/"unreachable":"/g)?.length).toBeGreaterThan(3);

    // It breaks off again, further on: a simulated bench begins anew.
    const then = await traced(fresh(), ['--resume', broken.record]);
    expect(then.status).toBe(69);
    const runs = fresh();
    const now = await railproof([
      ...['run', '--resume', broken.record, '--bench', join(then.trace, 'replay.yaml'), '--runs', runs],
    ]);
    expect(now.status).toBe(69);
    const shown = shownBy(onlyIn(runs));
    expect(shown).toEqual(shownBy(then.record));
    expect(shown['takenOver']).toHaveLength(1);
  });
});

describe('a trace', () => {
  let then: Traced;
  beforeAll(async () => {
    then = await traced(fresh(), ['quick-look', '--bench', 'fixtures/benches/nursery.yaml', ...module]);
    expect(then.status).toBe(0);
  });

  /** A copy that may be changed. */
  const copy = (): string => {
    const trace = join(fresh(), 'trace');
    cpSync(then.trace, trace, { recursive: true });
    return trace;
  };

  it('shows another voltage when one digit of one reply is another', async () => {
    const trace = copy();
    const meter = join(trace, 'meter.jsonl');
    const text = readFileSync(meter, 'utf8');
    let reading = 0;
    // The first few are those of the look before the first step.
    const other = text.replace(/"\+1\.52/g, (begins) => (++reading === 5 ? '"+1.51' : begins));
    expect(other).not.toBe(text);
    writeFileSync(meter, other);
    const now = await replayed(trace, fresh());
    const value = (record: string): unknown =>
      shownBy(record).findings.find(({ name }) => name === 'open-circuit-voltage')?.value;
    expect(value(then.record)).toBeGreaterThan(15);
    expect(value(now.record)).not.toBe(value(then.record));
  });

  it('that was cut off says where, and what is asked there now', async () => {
    const trace = copy();
    const load = join(trace, 'load.jsonl');
    const lines = readFileSync(load, 'utf8').split('\n').slice(0, 60);
    writeFileSync(load, `${lines.join('\n')}\n`);
    const now = await replayed(trace, fresh());
    expect(now.status).toBe(69);
    expect(now.stderr).toMatch(
      /load\.jsonl:61: the recording has come to its end, and now "[^"]+" was sent\. +What was recorded ended here, or was cut off/,
    );
    truncateSync(load, statSync(load).size - 5);
    const torn = await replayed(trace, fresh());
    expect(torn.status).toBe(65);
    expect(torn.stderr).toMatch(
      /load\.jsonl:60: .* is not a line of a recorded dialogue; was it cut off here\?/,
    );
  });

  it('of another procedure is refused at the first message that is another', async () => {
    const trace = copy();
    const procedure = join(trace, 'procedure.yaml');
    const text = readFileSync(procedure, 'utf8');
    const other = text.replace(/load-ramp: \{[^}]*\}/, 'load-ramp: { from: 0 A, to: 1.23456 A, points: 3 }');
    expect(other).not.toBe(text);
    writeFileSync(procedure, other);
    const now = await replayed(trace, fresh());
    expect(now.status).toBe(69);
    expect(now.stderr).toMatch(/load\.jsonl:\d+: the recording has "[^"]+" sent, and now "[^"]+" was sent/);
    expect(now.stderr).toMatch(/replays only with the procedure, the module and the driver/);
  });

  it('holds answers that no other question gets', async () => {
    const trace = copy();
    const operator = join(trace, 'operator.jsonl');
    const text = readFileSync(operator, 'utf8');
    const other = text.replace('"acknowledged":"mains"', '"acknowledged":"other"');
    expect(other).not.toBe(text);
    writeFileSync(operator, other);
    const now = await replayed(trace, fresh());
    expect(now.status).toBe(65);
    expect(now.stderr).toMatch(/operator\.jsonl:3: the recording has 'other' acknowledged, and now 'mains'/);
  });

  it("is not read as a record's, and hides none", async () => {
    expect((await railproof(['analyse', then.record])).status).toBe(0);
    const listed = await railproof(['runs', join(then.record, '..'), '--json']);
    expect((JSON.parse(listed.stdout) as { runs: unknown[] }).runs).toHaveLength(1);
  });
});
