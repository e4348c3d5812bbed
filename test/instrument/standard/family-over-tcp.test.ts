import { describe, it } from 'vitest';
import { realClock } from '../../../src/clock/real-clock.js';
import { Instrument } from '../../../src/instrument/instrument.js';
import { openTcp } from '../../../src/instrument/tcp-connection.js';
import { family, familyNames } from './families.js';
import { readOn } from './open-family.js';
import { serveStandard } from './serve-standard.js';

const values = { amps: 1.5, volts: 24, watts: 60, channel: 102 };
/** An operation after which the reading is what was set up, where there is one. */
const before: Readonly<Record<string, string>> = {
  voltage: 'measure-voltage',
  resistance: 'measure-resistance',
  'measures-voltage': 'measure-voltage',
  'measures-resistance': 'measure-resistance',
  'input-state': 'input-on',
  'output-state': 'output-on',
  'closed-channel': 'close-channel',
};
const due: Readonly<Record<string, unknown>> = { 'closed-channel': values.channel };

describe('over a real socket', () => {
  it.concurrent.for(familyNames)(
    '%s is opened, told everything, read, and given back',
    { timeout: 30_000 },
    async (name, { expect, onTestFinished }) => {
      const { driver, instrument, measures } = family(name);
      const served = await serveStandard(instrument);
      onTestFinished(() => served.close());
      const opened = await Instrument.open({
        role: driver.role,
        driver,
        connection: await openTcp(served.address),
        clock: realClock,
        first: 'make-safe',
      });
      onTestFinished(() => opened.close());
      expect(opened.identity).toBe('NURSERY,BENCH,K1,1.0');
      for (const operation of Object.keys(driver.operations)) await opened.perform(operation, values);
      for (const [reading, { kind }] of Object.entries(driver.readings)) {
        const operation = before[reading];
        if (operation !== undefined && opened.has(operation)) await opened.perform(operation, values);
        if (kind === 'number') measures(reading, 12.25);
        const wanted = kind === 'number' ? 12.25 : (due[reading] ?? true);
        expect(await readOn(opened, reading), reading).toBe(wanted);
      }
      if (opened.has('make-safe')) await opened.perform('make-safe');
      await opened.release();
      await opened.close();
      expect(instrument.errors.isEmpty).toBe(true);
      const ends = [...driver.release, ...driver.local].at(-1)?.text;
      if (ends !== undefined) expect(instrument.heard.slice(-2)).toContain(ends);
    },
  );
});
