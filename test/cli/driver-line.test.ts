import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { driverLine, atDriverLine } from '../../src/cli/driver-line.js';
import { shelves } from '../../src/cli/shipped.js';
import { readDriver } from '../../src/files/read-driver.js';
import { InstrumentComplainedError } from '../../src/instrument/instrument-errors.js';
import { lastLine, loadAtSocket, railproof } from './at-a-socket.js';

const shipped = () => readDriver('load-input-scpi', shelves);
const lineOf = (text: string, part: string): number =>
  text.split('\n').findIndex((line) => line.includes(part)) + 1;

describe('the line of a driver', () => {
  it('is that of the message, in a shipped one by its place in the program', async () => {
    const file = await shipped();
    const part = { driver: 'load-input-scpi', section: 'operations', name: 'set-current', index: 0 } as const;
    expect(driverLine(part, [file])).toBe(
      `drivers/load-input-scpi.yaml:${lineOf(file.text, 'set-current:')}`,
    );
  });

  it('is told with what an instrument would not take', async () => {
    const file = await shipped();
    const part = { driver: 'load-input-scpi', section: 'prepare', index: 0 } as const;
    const refused = new InstrumentComplainedError({
      ...{ address: 'tcp://127.0.0.1:5025', entries: [{ number: -113, text: 'Undefined header' }] },
      ...{ after: ['*CLS'], part },
    });
    expect(atDriverLine(refused, [file])).toMatchObject({
      code: 'INSTRUMENT_COMPLAINED',
      exitCode: 69,
      message: `${refused.message}; see drivers/load-input-scpi.yaml:${lineOf(file.text, 'prepare:')}`,
    });
  });

  it('is not made up where nobody knows it', async () => {
    const error = new Error('something else');
    expect(atDriverLine(error, [await shipped()])).toBe(error);
    expect(driverLine(undefined, [await shipped()])).toBeUndefined();
  });
});

it('a run that cannot begin names the line of the message that was refused', async () => {
  const load = await loadAtSocket(undefined, (text) =>
    text.replace('prepare: ["*CLS"]', 'prepare: ["LAMP ON"]'),
  );
  const { status, stderr } = await railproof(
    ...['run', 'quick-look', '--bench', load.bench, '--module', 'fixtures/modules/K1.yaml', '--yes'],
  );
  expect(status).toBe(69);
  expect(stderr).toMatch(/reports -113 "Undefined header" after "LAMP ON"/);
  expect(stderr).toMatch(/; see \S+driver\.yaml:\d+/);
  expect(lastLine(stderr)).not.toBe('');
});

it('making safe names the line of what the load says, and cannot be read', async () => {
  const load = await loadAtSocket((message) => (message === 'INP?' ? { answer: 'PERHAPS' } : undefined));
  const { status, stderr } = await railproof('safe', '--bench', load.bench);
  const line = lineOf(readFileSync(load.driver, 'utf8'), 'input-state:');
  expect(line).toBeGreaterThan(1);
  expect(stderr).toContain(`driver.yaml:${line}`);
  expect(lastLine(stderr)).toMatch(/^THE LOAD MAY STILL BE ON/);
  expect(status).toBe(69);
});
