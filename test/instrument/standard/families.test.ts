import { describe, expect, it } from 'vitest';
import { VirtualClock } from '../../../src/clock/virtual-clock.js';
import type { Driver, Message } from '../../../src/files/driver.js';
import { Instrument } from '../../../src/instrument/instrument.js';
import { fillMessage, type OperationValues } from '../../../src/instrument/message.js';
import fc from '../../property.js';
import { type Family, family, familyNames } from './families.js';
import { opened, readOn } from './open-family.js';
import { virtualLineTo } from './serve-standard.js';

const values = fc.record({
  amps: fc.double({ min: 0, max: 40, noNaN: true }),
  volts: fc.double({ min: 0, max: 60, noNaN: true }),
  watts: fc.double({ min: 0, max: 200, noNaN: true }),
  channel: fc.constantFrom(101, 102, 103, 104),
});
const someValues = { amps: 2.5, volts: 12, watts: 100, channel: 103 };

/** Command, execution, device and query errors: what a legal message never sets. */
const anyError = 32 | 16 | 8 | 4;

function isClean({ instrument }: Family): boolean {
  return instrument.errors.isEmpty && (instrument.status.standard.read() & anyError) === 0;
}

/** All that the driver sends, as often as it does, with whether it is answered. */
function* messagesOf(
  driver: Driver,
  given: OperationValues,
): Generator<{ text: string; isAnswered: boolean }> {
  const told = (messages: readonly Message[]) =>
    messages.map(({ text }) => ({ text: fillMessage(text, given), isAnswered: false }));
  const asked = (messages: readonly Message[]) => [
    ...told(messages.slice(0, -1)),
    { text: messages.at(-1)?.text ?? '', isAnswered: true },
  ];
  yield* told(driver.remote);
  yield { text: '', isAnswered: false };
  yield* asked([{ text: driver.identify }]);
  if (driver.errors !== 'none') yield* asked([{ text: driver.errors.ask }]);
  if (driver.ready !== undefined) yield* asked([{ text: driver.ready.ask }]);
  yield* told(driver.prepare);
  for (const messages of Object.values(driver.operations)) yield* told(messages);
  for (const { ask } of Object.values(driver.readings)) yield* asked(ask);
  yield* told(driver.release);
  yield* told(driver.local);
}

describe.each(familyNames)('the shipped family %s', (name) => {
  it('says nothing that is not legal by IEEE 488.2 and SCPI-99', () => {
    fc.assert(
      fc.property(values, (given) => {
        const made = family(name);
        for (const { text, isAnswered } of messagesOf(made.driver, given)) {
          made.instrument.write(text);
          expect(made.instrument.readIfAny() !== undefined, text).toBe(isAnswered);
          expect(isClean(made), text).toBe(true);
        }
      }),
      { numRuns: 15 },
    );
  });

  it('brings about what its operations are called, as a session says them, and leaves no error', async () => {
    const made = await opened(name);
    for (const operation of Object.keys(made.driver.operations)) {
      await made.opened.perform(operation, someValues);
      const due = dueAfter[operation];
      if (due !== undefined) expect(due, operation).toContainEqual(made.has(operation));
    }
    await made.opened.release();
    expect(isClean(made)).toBe(true);
  });

  it('has its mistakes refused with the standard number, and goes on after them', async () => {
    const made = await opened(name);
    const { driver } = made;
    if (driver.errors === 'none') return;
    for (const [operation, messages] of Object.entries(driver.operations)) {
      for (const { mistake, number } of mistakes) {
        const wrong = messages.map((each) => ({ ...each, text: mistake(each.text) }));
        if (wrong.length === 0) continue;
        const clock = new VirtualClock(new Date(0));
        const spoilt = await Instrument.open({
          role: driver.role,
          driver: { ...driver, operations: { ...driver.operations, [operation]: wrong } },
          connection: virtualLineTo(made.instrument, clock),
          clock,
        });
        await expect(spoilt.perform(operation, someValues)).rejects.toMatchObject({
          code: 'INSTRUMENT_COMPLAINED',
          entries: expect.arrayContaining([expect.objectContaining({ number })]) as unknown,
        });
        for (const reading of Object.keys(driver.readings)) await readOn(spoilt, reading);
        await spoilt.release();
      }
    }
    expect(made.instrument.errors.isEmpty).toBe(true);
  });
});

describe('an instrument that is told what it cannot do', () => {
  it.each([
    ['set-current', 'CURR {amps}E6', -222],
    ['set-current', 'CURR {amps} V', -131],
    ['set-current', 'CURR MUCH', -224],
    ['set-current', 'CURR "{amps}"', -104],
    ['set-current', 'CURR', -109],
    ['set-current', 'CURRE {amps}', -113],
    ['set-current', 'CURR{amps}', -111],
    ['input-on', 'INP MAYBE', -224],
    ['input-on', 'INP1 ON', -113],
    ['input-on', 'INP ON 1', -103],
    ['current-mode', 'FUNC CURR;;INP ON', -102],
  ])('%s by %s says so with the number of the standard', async (operation, text, number) => {
    const made = family('load-input-scpi');
    const operations = { ...made.driver.operations, [operation]: [{ text }] };
    const { opened: load } = await opened('load-input-scpi', undefined, {
      ...made,
      driver: { ...made.driver, operations },
    });
    await expect(load.perform(operation, someValues)).rejects.toMatchObject({
      code: 'INSTRUMENT_COMPLAINED',
      entries: [{ number }],
    });
    expect(await load.flag('input-state')).toBe(false);
    expect(made.instrument.errors.isEmpty).toBe(true);
  });

  it('refuses everything until it is in remote, where it must be put there first', async () => {
    const made = family('load-remote-scpi');
    const { opened: load } = await opened('load-remote-scpi', undefined, {
      ...made,
      driver: { ...made.driver, remote: [] },
    });
    await expect(load.perform('input-on')).rejects.toMatchObject({ entries: [{ number: -221 }] });
    expect(made.has('input-on')).toBe(false);
    await (await opened('load-remote-scpi', undefined, made)).opened.perform('input-on');
    expect(made.has('input-on')).toBe(true);
  });

  it('is told on the channel that the bench names, whichever is selected at its panel meanwhile', async () => {
    const made = await opened('load-channel-scpi');
    await made.opened.perform('set-current', someValues);
    made.instrument.write('INST:NSEL 3');
    await made.opened.perform('input-on');
    expect([made.has('set-current'), made.has('input-on')]).toEqual([someValues.amps, true]);
    made.instrument.write('INST:NSEL 3;:INP?');
    expect(made.instrument.read()?.text).toBe('+0');
  });
});

/** What each operation leaves behind, in the words of whoever's body it is. */
const dueAfter: Readonly<Record<string, readonly unknown[]>> = {
  'make-safe': [false, 'VOLTage[:DC]', []],
  'input-on': [true],
  'input-off': [false],
  'output-on': [true],
  'output-off': [false],
  'current-mode': ['CURRent'],
  'voltage-mode': ['VOLTage'],
  'set-current': [someValues.amps],
  'set-voltage': [someValues.volts],
  'protect-current': [someValues.amps],
  'protect-voltage': [someValues.volts],
  'protect-power': [someValues.watts],
  'close-channel': [[someValues.channel]],
  'open-all': [[]],
};

/** A word that is not there; more data than there may be; a text that does not end. */
const mistakes: readonly { readonly mistake: (message: string) => string; readonly number: number }[] = [
  { mistake: (message) => message.replace(/^(\*?)/, '$1X'), number: -113 },
  { mistake: (message) => `${message}${message.includes(' ') ? ',' : ' '}1,1,1`, number: -108 },
  { mistake: (message) => `${message}${message.includes(' ') ? ',' : ' '}'1`, number: -151 },
];
