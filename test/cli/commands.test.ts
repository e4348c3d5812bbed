import { mkdirSync, mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { PassThrough } from 'node:stream';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { main } from '../../src/cli/program.js';
import type { Streams } from '../../src/cli/streams.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-commands-'));
const runs = join(folder, 'runs');

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

/** A command in this process, with streams of its own. */
async function railproof(...args: string[]): Promise<{ status: number; stdout: string; stderr: string }> {
  const [stdin, stdout, stderr] = [0, 1, 2].map(
    () => new PassThrough({ encoding: 'utf8', highWaterMark: 1 << 24 }),
  );
  const streams = { stdin, stdout, stderr, environment: {} } as unknown as Streams;
  const status = await main(args, streams);
  return { status, stdout: String(stdout?.read() ?? ''), stderr: String(stderr?.read() ?? '') };
}

const nursery = ['--bench', 'fixtures/benches/nursery.yaml', '--module', 'fixtures/modules/K1.yaml'];

describe('run', () => {
  it('--dry-run shows the plan and makes no record', async () => {
    const { status, stdout } = await railproof('run', 'real-limit', ...nursery, '--runs', runs, '--dry-run');
    expect(status).toBe(0);
    expect(stdout).toMatch(/2 {2}load-ramp +about 21 s {2}21 points from 0 A to 100 % of rated-current/);
    expect(stdout).toContain('cautions to acknowledge: mains, hot-surfaces, earth-link-removed');
    expect(stdout).toContain('never above 8 A (the bench), 18.75 V (the nameplate), 150 W (the bench)');
    expect(() => readdirSync(runs)).toThrow('ENOENT');
  });

  it('--dry-run --json is the plan for a program', async () => {
    const { status, stdout } = await railproof('run', 'real-limit', ...nursery, '--dry-run', '--json');
    expect(JSON.parse(stdout)).toMatchObject({
      format: 'railproof/plan 1',
      steps: [
        { kind: 'open-circuit', seconds: 5 },
        ...['load-ramp', 'dropout-search', 'limit-trace', 'recovery-check'].map((kind) => ({ kind })),
      ],
      cautions: ['mains', 'hot-surfaces', 'earth-link-removed'],
    });
    expect(status).toBe(0);
  });

  it('--json prints one object on stdout, and nothing else there', async () => {
    const { status, stdout, stderr } = await railproof(
      'run',
      'quick-look',
      ...nursery,
      '--runs',
      runs,
      '--json',
    );
    expect(status).toBe(0);
    const result = JSON.parse(stdout) as Record<string, unknown>;
    expect(result).toMatchObject({
      format: 'railproof/run 1',
      module: 'K1',
      procedure: 'quick-look',
      ended: 'completed',
    });
    expect(stderr).toContain('The load is off; it was read back.');
  });

  it('the exit status is 1 when the module does not conform', async () => {
    const wish = join(folder, 'wish.yaml');
    writeFileSync(
      wish,
      'railproof: procedure 1\nname: wish\ntitle: Wish\nsteps: [{ open-circuit: { for: 1 s } }]\ncriteria:\n  - { finding: open-circuit-voltage, at-least: 20 V }\n',
    );
    const { status, stdout } = await railproof('run', wish, ...nursery, '--runs', join(folder, 'wish'));
    expect(stdout).toContain('DOES NOT CONFORM');
    expect(status).toBe(1);
  });

  it('the exit status is 2 when what is required was not measured', async () => {
    const blind = join(folder, 'blind.yaml');
    writeFileSync(
      blind,
      'railproof: procedure 1\nname: blind\ntitle: Blind\nsteps: [{ open-circuit: { for: 1 s } }]\ncriteria:\n  - { finding: dropout-current, at-least: 4 A }\n',
    );
    const { status, stdout } = await railproof('run', blind, ...nursery, '--runs', join(folder, 'blind'));
    expect(stdout).toContain('was not measured');
    expect(status).toBe(2);
  });

  it('an operator step is done by the simulated operator, and its answer is a finding', async () => {
    const bench = join(folder, 'answers.yaml');
    const { readFileSync } = await import('node:fs');
    const text = readFileSync('fixtures/benches/nursery.yaml', 'utf8');
    writeFileSync(
      bench,
      text.replace('  circuit: single\n', '  circuit: single\n  answers: { case-temperature: 41 °C }\n'),
    );
    const ask = join(folder, 'ask.yaml');
    writeFileSync(
      ask,
      'railproof: procedure 1\nname: ask\ntitle: Ask\nsteps:\n  - wait: { for: 1 s }\n  - operator: { name: case-temperature, ask: How warm is the case?, answer: temperature }\n',
    );
    const { stdout } = await railproof(
      'run',
      ask,
      '--bench',
      bench,
      ...nursery.slice(2),
      '--runs',
      join(folder, 'ask'),
      '--json',
    );
    const { findings } = JSON.parse(stdout) as { findings: { name: string }[] };
    expect(findings).toEqual([
      expect.objectContaining({ name: 'answer-of-case-temperature', value: 41, unit: 'Cel' }),
    ]);
  });

  it('a procedure that needs a person does not begin without one', async () => {
    const bench = join(folder, 'real.yaml');
    writeFileSync(
      bench,
      'railproof: bench 1\nname: real\ninstruments:\n  load: { driver: load-input-scpi, connection: "tcp://127.0.0.1:9" }\nleads: { resistance: 35 mΩ, uncertainty: 5 mΩ }\nvoltage-from: load-terminals\nlimits: { voltage: 60 V, current: 8 A, power: 120 W }\n',
    );
    const { status, stderr } = await railproof(
      'run',
      'quick-look',
      '--bench',
      bench,
      ...nursery.slice(2),
      '--runs',
      runs,
    );
    expect(stderr).toBe(
      'the procedure needs someone at the bench for its wiring and its cautions, and there is no terminal. Run it in a terminal, or with --view, which serves a page to answer on; --yes acknowledges wiring and cautions only.\n',
    );
    expect(status).toBe(64);
  });
});

describe('analyse', () => {
  let record: string;

  beforeAll(async () => {
    const into = join(folder, 'again');
    await railproof('run', 'real-limit', ...nursery, '--runs', into);
    record = join(into, readdirSync(into)[0] ?? '');
  });

  it('gives the same findings again, to the last digit', async () => {
    const { readFileSync } = await import('node:fs');
    const { status, stdout } = await railproof('analyse', record, '--json', '--strict');
    expect(JSON.parse(stdout)).toEqual(JSON.parse(readFileSync(join(record, 'findings.json'), 'utf8')));
    expect(status).toBe(0);
  });
});

describe('runs', () => {
  it('lists the records with how they ended and what they recommend', async () => {
    const { stdout } = await railproof('runs', runs);
    expect(stdout).toMatch(
      /^record +ended +outcome +recommended\n\d{8}T\d{6}Z-K1-quick-look +completed +conforms +3\.\d\d A\n$/,
    );
  });

  it('lists a record that was cut off, too', async () => {
    const cut = join(folder, 'cut');
    mkdirSync(join(cut, '20261201T000000Z-K2-real-limit'), { recursive: true });
    writeFileSync(join(cut, '20261201T000000Z-K2-real-limit', 'run.json'), '{}');
    expect((await railproof('runs', cut)).stdout).toMatch(/K2-real-limit +cut-off/);
  });

  it('says so when there are none, and when there is no such folder', async () => {
    const empty = join(folder, 'none');
    mkdirSync(empty);
    expect((await railproof('runs', empty)).stdout).toBe(`No records in ${empty}.\n`);
    expect((await railproof('runs', 'fixtures/runs/20261130T091500Z-K1-real-limit')).stdout).toContain(
      'is one record itself; railproof analyse shows what it holds.',
    );
    expect((await railproof('runs', join(folder, 'nowhere'))).status).toBe(66);
  });
});

describe('check', () => {
  it('says of each file what it is, and of a bad one what is wrong', async () => {
    const bad = join(folder, 'bad.yaml');
    writeFileSync(bad, 'railproof: module 1\nname: K9\nrated: { voltage: 15 V, current: 4 }\n');
    const { status, stdout, stderr } = await railproof('check', 'fixtures/modules/K1.yaml', bad);
    expect(stdout).toBe('fixtures/modules/K1.yaml: a module file, and right\n');
    expect(stderr).toMatch(
      /bad\.yaml:3:34: rated\.current: found the bare number 4; a current needs its unit: 4 A, 400 mA/,
    );
    expect(status).toBe(65);
  });

  it('says that a driver is for another role', async () => {
    const { readFileSync } = await import('node:fs');
    const bench = join(folder, 'role.yaml');
    const text = readFileSync('fixtures/benches/nursery.yaml', 'utf8');
    writeFileSync(bench, text.replace('load-input-scpi', 'meter-read-scpi'));
    const { status, stderr } = await railproof('check', bench);
    expect(stderr).toMatch(
      /role\.yaml:5:19: instruments\.load\.driver: meter-read-scpi is a driver for a meter, not for a load/,
    );
    expect(status).toBe(65);
  });

  it('looks at the drivers of a bench as well', async () => {
    const { readFileSync } = await import('node:fs');
    const bench = join(folder, 'odd.yaml');
    writeFileSync(
      bench,
      readFileSync('fixtures/benches/nursery.yaml', 'utf8').replace('load-input-scpi', 'load-imput-scpi'),
    );
    const { status, stderr } = await railproof('check', bench);
    expect(stderr).toMatch(
      /odd\.yaml:5:19: instruments\.load\.driver: no driver is called 'load-imput-scpi'; did you mean 'load-input-scpi'\?/,
    );
    expect(status).toBe(66);
  });
});

describe('drivers', () => {
  it('lists what is shipped', async () => {
    const { stdout } = await railproof('drivers');
    expect(stdout.split('\n').map((line) => line.split(/ {2,}/)[0])).toEqual([
      'load-channel-scpi',
      'load-input-scpi',
      'load-remote-scpi',
      'load-short-scpi',
      'load-source-scpi',
      'meter-function-scpi',
      'meter-query-scpi',
      'meter-read-scpi',
      'scanner-route-scpi',
      'source-output-scpi',
      'thermometer-query-scpi',
      '',
    ]);
  });

  it('--try without --connection is a usage error that shows how', async () => {
    const { status, stderr } = await railproof('drivers', '--try', 'load-input-scpi');
    expect(stderr).toContain('railproof drivers --try load-input-scpi --connection tcp://127.0.0.1:5025');
    expect(status).toBe(64);
  });
});

describe('schema', () => {
  it.each(['module', 'bench', 'driver', 'procedure'])(
    'of a %s is a JSON Schema with descriptions',
    async (kind) => {
      const { stdout } = await railproof('schema', kind);
      expect(JSON.parse(stdout)).toMatchObject({
        $schema: 'https://json-schema.org/draft/2020-12/schema',
        type: 'object',
      });
      expect(stdout).toContain('"description"');
    },
  );

  it('of an unknown kind suggests the nearest', async () => {
    const { status, stderr } = await railproof('schema', 'modul');
    expect(stderr).toContain("did you mean 'module'?");
    expect(status).toBe(64);
  });
});

describe('safe', () => {
  it('switches the load off and says that it was read back', async () => {
    const { status, stdout } = await railproof('safe', '--bench', 'fixtures/benches/nursery.yaml');
    expect(stdout).toBe('The load at simulated:standard-load is off; it was read back.\n');
    expect(status).toBe(0);
  });
});
