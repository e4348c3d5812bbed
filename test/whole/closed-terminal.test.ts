import { type ChildProcess, spawn } from 'node:child_process';
import { existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, expect, it, onTestFinished, vi } from 'vitest';
import { askLoad, journalOf, until } from './at-the-bench.js';
import { program, root } from './railproof.js';
import { serve } from './served.js';

vi.setConfig({ testTimeout: 60_000 });

const folder = mkdtempSync(join(tmpdir(), 'railproof-terminal-'));
let count = 0;

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

const asks = '  - operator: { ask: Is the fan on?, answer: text, name: fan }\n';
/** On the screen: what the step is going to ask, then the question itself. */
const question = /Is the fan on\?[^]*Is the fan on\?/;
const ramp = '  - load-ramp: { from: 1 A, to: 3 A, points: 200, dwell: 50 ms }\n';

/** A run that has a terminal of its own: a pty, of which socat holds the other end. */
async function inTerminal(steps: string, begun: RegExp) {
  count += 1;
  const path = (name: string): string => join(folder, `${name}-${count}`);
  const served = await serve('fixtures/benches/nursery.yaml', path('bench'), 'tcp');
  onTestFinished(() => served.close());
  writeFileSync(path('procedure'), `railproof: procedure 1\nname: walk\ntitle: Walk\nsteps:\n${steps}`);
  const command = [
    ...[process.execPath, program, 'run', path('procedure'), '--bench', served.bench, '--yes'],
    ...['--module', 'fixtures/modules/K1.yaml', '--runs', path('runs')],
  ];
  // The shell is told that the terminal is gone, passes it on, and outlives the run to tell how it ended; so a
  // Ctrl-C that comes as a signal, just before the question takes it as a key, is none of its own.
  writeFileSync(
    path('session'),
    `trap '' INT; exec 3<&0\n${command.map((word) => `'${word}'`).join(' ')} <&3 3<&- &\nrun=$!\ntrap 'kill -HUP $run' HUP\n` +
      `wait $run; status=$?; [ $status = 129 ] && { wait $run; status=$?; }\necho $status > '${path('status')}'\n`,
  );
  const terminal: ChildProcess = spawn('socat', ['-', `EXEC:sh ${path('session')},pty,setsid,ctty,stderr`], {
    cwd: root,
    stdio: ['pipe', 'pipe', 'inherit'],
  });
  onTestFinished(() => void terminal.kill('SIGKILL'));
  let seen = '';
  terminal.stdout?.on('data', (more: Buffer) => {
    seen += more.toString();
  });
  await until(() => begun.test(seen) || begun.test(journalOf(path('runs'))));
  return {
    terminal,
    isOn: () => askLoad(served.bench),
    journal: () => journalOf(path('runs')),
    status: async () => {
      await until(() => existsSync(path('status')) && readFileSync(path('status'), 'utf8') !== '');
      return Number(readFileSync(path('status'), 'utf8'));
    },
    shown: () => seen,
  };
}

it.each([
  ['while the load is at work', ramp, /"phase":"ramp"/],
  ['at a question', asks + ramp, question],
])('a terminal that is closed %s ends the run safely, and its status is kept', async (_, steps, begun) => {
  const run = await inTerminal(steps, begun);
  run.terminal.kill('SIGKILL');
  expect(await run.status()).toBe(3);
  expect(await run.isOn()).toBe('0');
  expect(run.journal().trimEnd().split('\n').at(-1)).toMatch(
    /"event":"ended","how":"stopped","reason":"[^"]*terminal was closed/,
  );
});

it('Ctrl-C at a question is a wish to end like any other', async () => {
  const run = await inTerminal(asks + ramp, question);
  run.terminal.stdin?.write('\u0003');
  expect(await run.status()).toBe(3);
  expect(run.shown()).toContain('stopped with Ctrl-C; making the bench safe');
  expect(run.shown()).toContain('The load is off; it was read back.');
});
