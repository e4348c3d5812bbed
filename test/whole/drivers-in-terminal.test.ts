import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it, onTestFinished } from 'vitest';
import { realClock } from '../../src/clock/real-clock.js';
import { formatAddress } from '../../src/files/connection-address.js';
import { withoutSocat } from '../instrument/fixtures/serve-pty.js';
import { quirkyInstrument } from '../instrument/quirks/quirky-instrument.js';
import { quirkyLoad } from '../instrument/quirks/quirky-load.js';
import { serveQuirkyTcp } from '../instrument/quirks/serve-quirky.js';
import { until } from './at-the-bench.js';
import { startInTerminal } from './in-terminal.js';

const patience = 180_000;

const driverText = String.raw`railproof: driver 1
name: load-nursery
role: load
summary: The load of the nursery's workshop
wire: { timeout: 600 ms }
identify: "*IDN?"
errors: { ask: "SYST:ERR?", clear: "^0\\b" }
operations:
  make-safe: ["INP OFF"]
  input-on: ["INP ON"]
  input-off: ["INP OFF"]
  current-mode: ["FUNC CURR"]
  set-current: ["CURR {amps}"]
readings:
  voltage: { ask: "MEAS:VOLT?", unit: V }
  current: { ask: "MEAS:CURR?", unit: A }
  input-state: { ask: "INP?", true-when: "^(1|ON)$" }
`;

/** A trial at a terminal, up to the question; then these keys are pressed, and it is waited for the end. */
async function answered(keys: string) {
  const load = quirkyLoad();
  // It is deaf for a while after its mode is changed: what sets it to 0 A must not go unheard.
  const instrument = quirkyInstrument({ deaf: { after: /^FUNC/, lasting: 0.3 } }, load.knows, realClock);
  const address = formatAddress(await serveQuirkyTcp(instrument));
  const folder = mkdtempSync(join(tmpdir(), 'railproof-question-'));
  onTestFinished(() => {
    rmSync(folder, { recursive: true, force: true });
  });
  writeFileSync(join(folder, 'load.yaml'), driverText);
  const written = join(folder, 'my-load');
  const terminal = await startInTerminal(
    ['drivers', '--try', join(folder, 'load.yaml'), '--connection', address, '--write', written],
    join(folder, 'start'),
  );
  await until(() => terminal.shown().includes('anything else leaves it out.'));
  const before = instrument.heard.length;
  terminal.type(keys);
  await terminal.closed;
  const screen = terminal.shown().replaceAll('\r', '').trimEnd();
  return { load, instrument, screen, told: instrument.heard.slice(before), written };
}

describe.skipIf(withoutSocat)('the question before switching on, at a terminal', () => {
  it(
    'answered with yes switches on once, at 0 A that was heard, and off again',
    async () => {
      const { told, screen, instrument, load, written } = await answered('yes\r');
      const on = told.indexOf('INP ON');
      expect(told.filter((message) => message === 'INP ON')).toHaveLength(1);
      expect(told.slice(0, on).filter((message) => !message.endsWith('?'))).toEqual(['FUNC CURR', 'CURR 0']);
      expect(told.slice(on)).toContain('INP OFF');
      expect(screen).toMatch(/^understood +input-state .* yes$/m);
      expect(screen.split('\n').at(-1)).toBe('The load is off; it was read back.');
      expect(instrument.missed).not.toContain('INP ON');
      expect(load.state).toMatchObject({ input: '0', CURR: '0' });
      expect(readFileSync(`${written}.yaml`, 'utf8')).toMatch(/answer: "1", is: yes \}/);
    },
    patience,
  );

  it.each([
    ['no', 'no\r', undefined],
    ['the end of the input', '\x04', undefined],
    ['Ctrl-C', '\x03', 'stopped with Ctrl-C'],
  ])(
    'answered with %s switches nothing on, proves that it is off, and keeps what came of it',
    async (_, keys, why) => {
      const { told, screen, load, written } = await answered(keys);
      expect(told).not.toContain('INP ON');
      expect(screen).not.toContain('MAY STILL BE ON');
      const [before, last] = screen.split('\n').slice(-2);
      expect(last).toBe('The load is off; it was read back.');
      if (why !== undefined) expect(before).toBe(why);
      expect(load.state).toMatchObject({ input: '0', CURR: '0' });
      expect(readFileSync(`${written}.yaml`, 'utf8')).toContain('name: my-load');
    },
    patience,
  );
});
