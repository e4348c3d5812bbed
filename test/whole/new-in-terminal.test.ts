import { mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { stripVTControlCharacters } from 'node:util';
import { afterAll, beforeAll, describe, expect, it, onTestFinished } from 'vitest';
import { formatAddress } from '../../src/files/connection-address.js';
import { readBench } from '../../src/files/read-bench.js';
import { withoutSocat } from '../instrument/fixtures/serve-pty.js';
import { until } from './at-the-bench.js';
import { type InTerminal, startInTerminal } from './in-terminal.js';
import { instrument, nobody } from './instruments.js';
import { railproof } from './railproof.js';
import { type Served, serve } from './served.js';
import { noSmallDisks, onLockedDisk } from './small-disk.js';

const patience = 180_000;

let folder = '';
let served: Served;

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'railproof-new-'));
  served = await serve('fixtures/benches/nursery.yaml', join(folder, 'live.yaml'), 'tcp');
});

afterAll(async () => {
  await served.close();
  rmSync(folder, { recursive: true, force: true });
});

/** A `railproof new` on a terminal, in a folder of its own. */
async function begin(kind: string, columns = 80, environment: NodeJS.ProcessEnv = {}) {
  const here = mkdtempSync(join(tmpdir(), 'railproof-new-'));
  onTestFinished(() => {
    rmSync(here, { recursive: true, force: true });
  });
  const session = mkdtempSync(join(tmpdir(), 'railproof-session-'));
  onTestFinished(() => {
    rmSync(session, { recursive: true, force: true });
  });
  const terminal = await startInTerminal(['new', kind], join(session, 'start'), {
    ...{ columns, environment, folder: here },
  });
  return { terminal, here, answer: answerer(terminal) };
}

/** Each answer is typed when its question has come. */
function answerer(terminal: InTerminal): (question: string, answer: string) => Promise<void> {
  let from = 0;
  return async (question, answer) => {
    await until(() => {
      const at = screenOf(terminal).indexOf(question, from);
      return at >= 0 && screenOf(terminal).endsWith('> ');
    });
    from = screenOf(terminal).length;
    terminal.type(answer);
  };
}

function screenOf(terminal: InTerminal): string {
  return stripVTControlCharacters(terminal.shown()).replaceAll('\r', '');
}

describe.skipIf(withoutSocat)('railproof new, at a terminal', () => {
  it(
    'finds who is at each address, goes on with one that does not answer, and writes a bench that can be used at once',
    async () => {
      const { instruments } = (await readBench(served.bench)).value;
      const mute = await instrument(() => undefined);
      onTestFinished(() => mute.close());
      const refused = await nobody();
      const { terminal, here, answer } = await begin('bench');
      await answer('What is the bench called?', 'corner bench\r');
      await answer('Are there instruments', '\r');
      await answer('Where is an instrument?', '127.0.0.1:5025\r');
      await answer(
        'on the network it is written tcp://127.0.0.1:5025',
        `${formatAddress(instruments.load.connection)}\r`,
      );
      await answer('What is it on this bench?', '\r');
      await answer('Which driver speaks to it?', `${mute.address}\r`);
      await answer('what is asked for now is its driver', 'load-input-scpi\r');
      await answer('Where is the next instrument?', `${formatAddress(instruments.load.connection)}\r`);
      await answer('the load is at', `${mute.address}\r`);
      await answer('Nothing answers. Is it switched on', 'thermometer\r');
      await answer('Which driver speaks to it?', '1\r');
      await answer('Where is the next instrument?', `${refused}\r`);
      await answer('the connection is refused', '\r');
      await answer('Where is the next instrument?', '\r');
      await answer('How much resistance have the leads', '\r');
      await answer('an answer is needed', '35 mohm\r');
      await answer('How far off may that be?', '\r');
      await answer('What is the highest voltage', '\r');
      await answer('What is the highest current?', '8 A\r');
      await answer('What is the highest power?', '120 W\r');
      await answer('How warm may the case', '\r');
      await answer('How warm is the air', '\r');
      await terminal.closed;
      const written = join(here, 'bench.yaml');
      const { value } = await readBench(written);
      expect(value).toEqual({
        name: 'corner bench',
        instruments: {
          load: { driver: 'load-input-scpi', connection: instruments.load.connection },
          thermometer: {
            driver: 'thermometer-query-scpi',
            connection: expect.objectContaining({ kind: 'tcp' }) as object,
          },
        },
        leads: { resistance: 0.035, uncertainty: 0.007 },
        voltageFrom: 'load-terminals',
        limits: { voltage: 60, current: 8, power: 120, temperature: 90 },
      });
      const text = readFileSync(written, 'utf8');
      expect(text).toContain('# It said that it is railproof,simulated load');
      expect(text).toContain('uncertainty: 7 mΩ }');
      expect(text).toContain('# It did not answer when this file was made');
      expect(mute.heard.every((line) => line.trim() === '' || line.includes('?'))).toBe(true);
      expect(screenOf(terminal)).toContain('bench.yaml: a bench file, and right');
      const [next = ''] = /railproof drivers --try .*$/m.exec(screenOf(terminal)) ?? [];
      const tried = await railproof(next.trim().split(' ').slice(1));
      expect(tried.stdout).toContain('understood');
      expect(tried.status).toBe(0);
    },
    patience,
  );

  it.each([
    ['Ctrl-C', '\x03', 'stopped with Ctrl-C; nothing was written.'],
    ['Ctrl-C in the middle of an answer', '15\x03', 'stopped with Ctrl-C; nothing was written.'],
    ['the end of the input', '\x04', 'the input ended; nothing was written.'],
  ])(
    'ends at %s, whole lines and all, and writes nothing',
    async (_, keys, words) => {
      const { terminal, here, answer } = await begin('module');
      await answer('What is the module called?', 'K1\r');
      await answer('What is it, and where', '\r');
      await answer('Which output voltage', keys);
      await terminal.closed;
      expect(screenOf(terminal)).toMatch(new RegExp(`\\n${words} Begin again whenever you like\\.\\n$`));
      expect(readdirSync(here)).toEqual([]);
    },
    patience,
  );

  it.skipIf(noSmallDisks)(
    'asks nothing where what is answered could not be written',
    async () => {
      const disk = mkdtempSync(join(folder, 'disk-'));
      const path = join(disk, 'K1.yaml');
      const terminal = await startInTerminal(['new', 'module', path], join(folder, 'locked'), {
        startedBy: onLockedDisk(disk),
      });
      await terminal.closed;
      expect(screenOf(terminal).replace(/\s+/g, ' ')).toBe(
        `${path}: the file can't be written: the file system is read-only. Make room there, or go to a folder where you may write, and begin again. `,
      );
    },
    patience,
  );

  it(
    'leaves off asking an instrument at Ctrl-C',
    async () => {
      const mute = await instrument(() => undefined);
      onTestFinished(() => mute.close());
      const { terminal, here, answer } = await begin('bench');
      await answer('What is the bench called?', '\r');
      await answer('Are there instruments', '\r');
      await answer('Where is an instrument?', `${mute.address}\r`);
      await until(() => mute.heard.length > 0);
      terminal.type('\x03');
      await terminal.closed;
      expect(screenOf(terminal)).toContain('stopped with Ctrl-C; nothing was written.');
      expect(readdirSync(here)).toEqual([]);
    },
    patience,
  );

  it(
    'breaks no word in a narrow window, and has colours only where they are wanted',
    async () => {
      const narrow = await begin('procedure', 40);
      await narrow.answer('What is it to find out?', '\x04');
      await narrow.terminal.closed;
      const lines = screenOf(narrow.terminal).split('\n');
      expect(Math.max(...lines.map((line) => line.length))).toBeLessThanOrEqual(40);
      expect(lines.join(' ').replace(/\s+/g, ' ')).toContain(
        'do several share a load, and what do they hold together?',
      );
      const strong = '\u001b[1m';
      expect(narrow.terminal.shown()).not.toContain(strong);
      const coloured = await begin('procedure', 80, { NO_COLOR: '' });
      await coloured.answer('What is it to find out?', '\x04');
      await coloured.terminal.closed;
      expect(coloured.terminal.shown()).toContain(`${strong}What is it to find out?`);
    },
    patience,
  );
});
