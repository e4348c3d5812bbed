import { execFileSync, spawn } from 'node:child_process';
import {
  existsSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  truncateSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { instrument, nobody } from './instruments.js';
import { railproof } from './railproof.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-bad-'));
const module = 'fixtures/modules/K1.yaml';
const nursery = 'fixtures/benches/nursery.yaml';
const runs = join(folder, 'runs');

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

function file(name: string, text: string): string {
  const path = join(folder, name);
  writeFileSync(path, text);
  return path;
}

function run(files: {
  procedure?: string;
  bench?: string;
  module?: string;
  runs?: string;
}): ReturnType<typeof railproof> {
  return railproof([
    'run',
    files.procedure ?? 'quick-look',
    ...['--bench', files.bench ?? nursery, '--module', files.module ?? module],
    ...['--runs', files.runs ?? runs, '--yes'],
  ]);
}

/** One line that says it, and no record, so nothing was begun. */
async function expectRefusal(
  outcome: ReturnType<typeof railproof>,
  status: number,
  message: string | RegExp,
): Promise<void> {
  const ended = await outcome;
  // What an instrument did meanwhile is told as it happens; the refusal is one line, the last.
  const said = ended.stderr.trimEnd().split('\n');
  expect(said.slice(0, -1).filter((line) => !line.startsWith('  '))).toEqual([]);
  expect(said.at(-1)).toMatch(message);
  expect(ended.status).toBe(status);
  expect(ended.stdout).toBe('');
  expect(existsSync(runs) ? readdirSync(runs) : []).toEqual([]);
}

const moduleText = readFileSync(module, 'utf8');

function procedureText(step: string): string {
  return `railproof: procedure 1\nname: mine\ntitle: Mine\nsteps:\n  - ${step}\n`;
}

describe('a file that is not right is refused in one line with its place, and nothing is begun', () => {
  it('an unknown key', async () => {
    const path = file('key.yaml', moduleText.replace('input: mains', 'inputt: mains'));
    await expectRefusal(run({ module: path }), 65, /key\.yaml:\d+:\d+: .*'inputt'; did you mean 'input'\?/);
  });

  it('a misspelt step', async () => {
    const path = file('step.yaml', procedureText('dropout-serch: { ceiling: 8 A }'));
    await expectRefusal(
      run({ procedure: path }),
      65,
      /step\.yaml:5:5: .*'dropout-serch'; did you mean 'dropout-search'\?/,
    );
  });

  it('a wrong unit', async () => {
    const path = file('unit.yaml', procedureText('load-ramp: { to: 4 V }'));
    await expectRefusal(run({ procedure: path }), 65, /unit\.yaml:5:\d+: .*4 V.*current/);
  });

  it('a bare number', async () => {
    const path = file('bare.yaml', procedureText('load-ramp: { to: 4 }'));
    await expectRefusal(run({ procedure: path }), 65, /bare\.yaml:5:\d+: .*4.*unit.*A/);
  });

  it('a reference to what is not measured by then', async () => {
    const path = file('early.yaml', procedureText('load-ramp: { to: 80 % of dropout-current }'));
    await expectRefusal(
      run({ procedure: path }),
      65,
      /early\.yaml:5:\d+: .*dropout-current, which no step before this one measures/,
    );
  });

  it("a plan beyond the bench's limits", async () => {
    const path = file('much.yaml', procedureText('load-ramp: { to: 9 A }'));
    await expectRefusal(
      run({ procedure: path }),
      65,
      /much\.yaml:5:\d+: load-ramp\.to: 9 A is more than the bench allows \(8 A\)/,
    );
  });

  it("a plan beyond the load's ratings", async () => {
    const weak = readFileSync('drivers/load-input-scpi.yaml', 'utf8').replace(
      /current: 40 A/,
      'current: 3 A',
    );
    file('weak-load.yaml', weak);
    const bench = file(
      'weak.yaml',
      readFileSync(nursery, 'utf8').replace('load-input-scpi', './weak-load.yaml'),
    );
    await expectRefusal(run({ bench }), 65, /4 A is more than the load's rating less 5 % allows \(2\.85 A\)/);
  });

  it('a bomb of aliases', async () => {
    const lines = ['railproof: module 1', 'name: &a0 [x, x, x, x, x, x, x, x, x]'];
    for (let level = 1; level < 9; level += 1) {
      lines.push(
        `k${level}: &a${level} [${Array(9)
          .fill(`*a${level - 1}`)
          .join(', ')}]`,
      );
    }
    await expectRefusal(
      run({ module: file('bomb.yaml', lines.join('\n')) }),
      65,
      /bomb\.yaml:\d+:\d+: .*alias/,
    );
  });

  it('a file that is not there', async () => {
    await expectRefusal(run({ module: join(folder, 'none.yaml') }), 66, /none\.yaml.*there is no such file/);
  });
});

describe('an instrument that is not as it should be ends the run before anything is energised', () => {
  function benchAt(name: string, address: string): string {
    return file(
      name,
      [
        'railproof: bench 1',
        'name: bad-bench',
        'instruments:',
        `  load: { driver: load-input-scpi, connection: "${address}" }`,
        'leads: { resistance: 35 mΩ, uncertainty: 5 mΩ }',
        'voltage-from: load-terminals',
        'limits: { voltage: 60 V, current: 8 A, power: 120 W }',
      ].join('\n'),
    );
  }

  it('it is not there', async () => {
    const address = await nobody();
    await expectRefusal(run({ bench: benchAt('nobody.yaml', address) }), 69, address);
  });

  it('it does not answer', async () => {
    const mute = await instrument(() => undefined);
    await expectRefusal(
      run({ bench: benchAt('mute.yaml', mute.address) }),
      69,
      /did not answer "\*IDN\?"|\*IDN\?/,
    );
    expect(mute.heard.filter((line) => line.startsWith('INP'))).toEqual([]);
    await mute.close();
  });

  it('it answers as something else', async () => {
    const other = await instrument((line, socket) => {
      if (line.endsWith('?')) socket.write('\x01\x02\x03\n');
    });
    await expectRefusal(run({ bench: benchAt('other.yaml', other.address) }), 69, other.address);
    expect(other.heard.filter((line) => line.startsWith('INP'))).toEqual([]);
    await other.close();
  });

  it('it sends a megabyte without an end', async () => {
    const endless = await instrument((_line, socket) => {
      socket.write('x'.repeat(1 << 20));
    });
    await expectRefusal(run({ bench: benchAt('endless.yaml', endless.address) }), 69, endless.address);
    await endless.close();
  });

  it('its input is on already', async () => {
    const busy = await instrument((line, socket) => {
      if (line === '*IDN?') socket.write('a load,of,someone,else\n');
      if (line === 'SYST:ERR?') socket.write('0,"No error"\n');
      if (line === 'INP?') socket.write('1\n');
    });
    const { status, stderr } = await run({
      bench: benchAt('busy.yaml', busy.address),
      runs: join(folder, 'busy'),
    });
    expect(stderr).toContain('is on');
    expect(status).not.toBe(0);
    expect(busy.heard).not.toContain('INP ON');
    await busy.close();
  });

  const socat = isThere('socat');
  it.skipIf(!socat && process.env['CI'] === undefined)('its port is in use', async () => {
    const link = join(folder, 'port');
    const pty = spawn('socat', [`pty,raw,echo=0,link=${link}`, 'pty,raw,echo=0'], { stdio: 'ignore' });
    try {
      await until(() => existsSync(link));
      const { SerialPort } = await import('serialport');
      const holder = new SerialPort({ path: link, baudRate: 9600, lock: true });
      await new Promise((resolve) => holder.once('open', resolve));
      await expectRefusal(
        run({ bench: benchAt('taken.yaml', `serial:${link}?baud=9600`) }),
        69,
        /another program has this port open/,
      );
      await new Promise((resolve) => {
        holder.close(resolve);
      });
    } finally {
      pty.kill();
    }
  });
});

describe('a record survives what happens to it', () => {
  let record: string;

  beforeAll(async () => {
    const into = join(folder, 'kept');
    const { status } = await run({ runs: into });
    expect(status).toBe(0);
    record = join(into, readdirSync(into)[0] ?? '');
  });

  it('a journal cut in the middle of a line reads to its last whole line, and says that it was cut off', async () => {
    const journal = join(record, 'journal.jsonl');
    const size = readFileSync(journal).length;
    truncateSync(journal, Math.round(size * 0.7));
    const { stdout, status } = await railproof(['analyse', record, '--json']);
    const result = JSON.parse(stdout) as { ended: string; findings: { name: string }[] };
    expect(result.ended).toBe('cut-off');
    expect(result.findings.map(({ name }) => name)).toContain('open-circuit-voltage');
    expect([0, 1, 2]).toContain(status);
    const strict = await railproof(['analyse', record, '--strict']);
    expect(strict.status).toBe(65);
    expect(strict.stderr.trimEnd().split('\n')).toHaveLength(1);
  });

  it('what was planned can not be changed afterwards unnoticed', async () => {
    const into = join(folder, 'forged');
    await run({ runs: into });
    const forged = join(into, readdirSync(into)[0] ?? '');
    expect((await railproof(['analyse', forged, '--strict'])).status).toBe(0);
    const header = join(forged, 'run.json');
    writeFileSync(header, readFileSync(header, 'utf8').replace('"current": 4,', '"current": 9,'));
    const { stdout } = await railproof(['analyse', forged]);
    expect(stdout).toContain(
      'DAMAGED RECORD: line 1 of the journal: it does not begin with the run.json that is here now',
    );
    expect((await railproof(['analyse', forged, '--strict'])).status).toBe(65);
  });

  it.skipIf(process.platform !== 'linux')(
    'a folder where none can be made is refused, not waited for',
    async () => {
      const { status, stderr } = await run({ runs: '/proc/railproof' });
      expect(stderr).toMatch(/\/proc\/railproof.* can't be written/);
      expect(status).toBe(74);
    },
  );

  it("a folder that can't be written is said before anything is energised", async () => {
    const blocked = file('a-file', 'not a folder');
    const { status, stderr, stdout } = await run({ runs: join(blocked, 'runs') });
    expect(status).toBe(74);
    expect(stderr.trimEnd().split('\n')).toHaveLength(1);
    expect(stderr).toMatch(/a-file.*can't be written/);
    expect(stdout).toBe('');
  });

  it('a folder that is no record is said to be none', async () => {
    const empty = join(folder, 'empty');
    mkdirSync(empty);
    const { status, stderr } = await railproof(['analyse', empty]);
    expect(status).toBe(66);
    expect(stderr).toMatch(/empty is no record/);
  });
});

function isThere(program: string): boolean {
  try {
    execFileSync(program, ['-V'], { stdio: 'ignore' });
    return true;
  } catch {
    return false;
  }
}

async function until(is: () => boolean): Promise<void> {
  while (!is()) await new Promise((resolve) => setTimeout(resolve, 10));
}
