import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { withoutSocat } from '../instrument/fixtures/serve-pty.js';
import { until } from './at-the-bench.js';
import { startInTerminal } from './in-terminal.js';
import { onScreen } from './screen.js';
import { type Served, serve } from './served.js';

const patience = 180_000;
const record = 'fixtures/runs/20261130T091500Z-K1-real-limit';
const module = 'fixtures/modules/K1.yaml';
const simulated = ['run', 'real-limit', '--bench', 'fixtures/benches/nursery.yaml', '--module', module];

let folder = '';
let served: Served;

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'railproof-terminal-'));
  served = await serve('fixtures/benches/nursery.yaml', join(folder, 'live.yaml'), 'tcp');
});

afterAll(async () => {
  await served.close();
  rmSync(folder, { recursive: true, force: true });
});

function live(name: string, columns: number, rows: number) {
  const args = ['run', 'real-limit', '--bench', served.bench, '--module', module];
  return startInTerminal([...args, '--runs', join(folder, name)], join(folder, `${name}.session`), {
    columns,
    rows,
  });
}

/** The wiring and each caution, as they come, acknowledged at the terminal. */
async function acknowledged(terminal: Awaited<ReturnType<typeof live>>): Promise<void> {
  for (let asked = 1; asked <= 4; asked += 1) {
    await until(() => terminal.shown().split('anything else ends the run: ').length > asked);
    terminal.type('yes\r');
  }
}

/** How often something stands on the screen. */
function times(screen: readonly string[], pattern: RegExp): number {
  return screen.filter((line) => pattern.test(line)).length;
}

describe.skipIf(withoutSocat)('a run at a terminal', () => {
  it(
    'is one block below what was asked, that follows the window and is gone after Ctrl-C',
    async () => {
      const terminal = await live('wide', 80, 24);
      await acknowledged(terminal);
      await until(() => / {2}\d\.\d{3} A {2,}\d/.test(terminal.shown()));
      const wide = onScreen(terminal.shown(), 80, 24);
      expect(times(wide, /^ +set to +voltage/)).toBe(1);
      expect(times(wide, /^▸ now +\d {2}/)).toBe(1);
      expect(wide.some((line) => line.startsWith('  1. Module unplugged.'))).toBe(true);
      // Every question was answered on its own line before the block came.
      const at = (pattern: RegExp): number => wide.findLastIndex((line) => pattern.test(line));
      expect(at(/ends the run: yes$/)).toBeLessThan(at(/^K1 · /));

      const before = terminal.shown().length;
      await terminal.resize(50, 12);
      await until(() => /^▸ now/m.test(terminal.shown().slice(before)));
      await until(() => terminal.shown().slice(before).includes(' gone, about '));
      const narrow = terminal.shown().slice(before);
      const block = onScreen(narrow.slice(narrow.lastIndexOf('K1 · real-limit')), 50, 12);
      expect(block.length).toBeLessThanOrEqual(12);
      for (const line of block) expect(Array.from(line).length).toBeLessThan(50);

      terminal.type('\x03');
      await terminal.closed;
      const screen = onScreen(terminal.shown().slice(before), 50, 12);
      const stopped = screen.findIndex((line) => line.includes('stopped with Ctrl-C; making the bench safe'));
      expect(stopped).toBeGreaterThanOrEqual(0);
      expect(times(screen.slice(stopped), /^ +set to +voltage|^▸ now|gone, about/)).toBe(0);
      expect(screen.join('\n').trimEnd().split('\n').at(-1)).toBe('The load is off; it was read back.');
      // Nothing is left hidden or moved.
      expect(terminal.shown()).not.toContain('\u001b[?25l');
    },
    patience,
  );

  it(
    'stays one block where somebody types and presses Enter meanwhile, of which nothing is left',
    async () => {
      const terminal = await live('typed', 80, 24);
      await acknowledged(terminal);
      await until(() => / {2}\d\.\d{3} A {2,}\d/.test(terminal.shown()));
      const before = terminal.shown().length;
      terminal.type('scrap\r\r\r');
      const sinceTyped = (): string => terminal.shown().slice(before);
      await until(() => /scrap(?:\r\n){3}/.test(sinceTyped()));
      const echoed = terminal.shown().length;
      await until(() => terminal.shown().slice(echoed).split(' gone, about ').length > 2);
      const screen = onScreen(terminal.shown(), 80, 24);
      expect(times(screen, /^K1 · /)).toBe(1);
      expect(times(screen, /^ +set to +voltage/)).toBe(1);
      expect(times(screen, /scrap/)).toBe(0);
      terminal.type('\x03');
      await terminal.closed;
      expect(times(onScreen(terminal.shown(), 80, 24), /^ +set to +voltage|scrap|gone, about/)).toBe(0);
    },
    patience,
  );

  it(
    'takes no Enter that was pressed before a question for its answer',
    async () => {
      const procedure = join(folder, 'plug.yaml');
      writeFileSync(
        procedure,
        [
          'railproof: procedure 1',
          'name: plug',
          'title: With the fan off',
          'purpose: Shows what a question takes for its answer.',
          'steps:',
          "  - operator: { name: lid, ask: 'Close the lid.', answer: done }",
          '  - open-circuit: { for: 3 s }',
          "  - operator: { name: fan, ask: 'Take the fan off K1.', answer: done }",
          '  - open-circuit: { for: 1 s }',
          '',
        ].join('\n'),
      );
      const args = ['run', procedure, '--bench', served.bench, '--module', module, '--yes'];
      const terminal = await startInTerminal(
        [...args, '--runs', join(folder, 'plug')],
        join(folder, 'plug.session'),
        { columns: 80, rows: 24 },
      );
      await until(() => terminal.shown().includes('Press Enter when it is done'));
      terminal.type('\r');
      await until(() => /^▸ now +2/m.test(terminal.shown()));
      terminal.type('\r\rdo');
      await until(() => terminal.shown().split('Press Enter when it is done').length > 2);
      terminal.type('not yet\r');
      await until(() => terminal.shown().includes('Not done, then.'));
      expect(terminal.shown()).not.toContain('donot yet');
      expect(terminal.shown()).not.toContain('4  open-circuit  reads');
      terminal.type('\r');
      await terminal.closed;
      expect(onScreen(terminal.shown(), 80, 24).join('\n')).toContain('The load is off; it was read back.');
    },
    patience,
  );

  it(
    'asks in words that are whole in 40 columns, and a question that is stopped leaves none behind',
    async () => {
      const terminal = await live('narrow', 40, 20);
      await until(() => terminal.shown().includes('ends the run: '));
      const asked = onScreen(terminal.shown(), 40, 20);
      expect(asked.slice(-2)).toEqual(['Is it wired so? Type yes; anything else', 'ends the run:']);
      for (const line of asked) expect(Array.from(line).length).toBeLessThanOrEqual(40);
      terminal.type('\x03');
      await terminal.closed;
      const screen = onScreen(terminal.shown(), 40, 20);
      expect(times(screen, /^ends the run:/)).toBe(1);
      expect(screen.join('\n').trimEnd()).toMatch(/The load is off; it was read back\.$/);
    },
    patience,
  );

  it(
    'is plain lines where the terminal is dumb, or a machine only passes for one, and never a colour where none is wanted',
    async () => {
      for (const environment of [{ TERM: 'dumb' }, { CI: 'true' }]) {
        const name = Object.keys(environment).join('');
        const terminal = await startInTerminal(
          [...simulated, '--runs', join(folder, name)],
          join(folder, `${name}.session`),
          { columns: 80, rows: 24, environment },
        );
        await terminal.closed;
        const lines = terminal.shown().replaceAll('\r', '').split('\n');
        expect(terminal.shown()).not.toContain('\u001b');
        expect(lines).toContain('step 2 of 5: load-ramp, 21 points from 0 A to 100 % of rated-current');
        expect(times(lines, /^step 5 of 5 done in \d+ s: /)).toBe(1);
        for (const line of lines) expect(Array.from(line).length).toBeLessThanOrEqual(80);
      }
    },
    patience,
  );
});

describe.skipIf(withoutSocat)('a report at a terminal', () => {
  it.each([
    ['with points of Unicode', { LC_ALL: 'C.UTF-8' }, /^15 ┤[ \u2800-\u28ff┊]+$/u],
    ['with ASCII where the locale has no more', { LC_ALL: 'C' }, /^15 \+[ *:]+$/],
  ])(
    'ends with a small chart, %s, and without colours with NO_COLOR',
    async (_, environment, row) => {
      const terminal = await startInTerminal(['analyse', record], join(folder, 'chart.session'), {
        columns: 80,
        rows: 24,
        environment,
      });
      await terminal.closed;
      const lines = terminal.shown().replaceAll('\r', '').trimEnd().split('\n');
      expect(terminal.shown()).not.toContain('\u001b');
      const chart = lines.slice(lines.indexOf('Voltage in V over current in A'));
      expect(chart.filter((line) => row.test(line))).toHaveLength(1);
      expect(chart.join(' ')).toContain(
        'N nameplate, 4 A; R recommended, 4.00 A; D dropout, between 5.276 A',
      );
      for (const line of lines) expect(Array.from(line).length).toBeLessThanOrEqual(80);
    },
    patience,
  );
});
