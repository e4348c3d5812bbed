import { describe, expect, it } from 'vitest';
import fc from '../../property.js';
import { family, familyNames } from './families.js';
import type { MeterFunction } from './meter-tree.js';
import { opened, readOn } from './open-family.js';
import type { ReplyForm } from './response.js';

/** Every form a reply may have: those of the standards, and what instruments make of them. */
const forms: fc.Arbitrary<ReplyForm> = fc.record({
  numbers: fc.constantFrom('NR1', 'NR2', 'NR3'),
  digits: fc.integer({ min: 6, max: 9 }),
  plus: fc.boolean(),
  exponentDigits: fc.constantFrom(1, 2, 3),
  bareExponent: fc.boolean(),
  letters: fc.constantFrom('upper', 'lower'),
  booleans: fc.constantFrom('digit', 'word'),
  words: fc.constantFrom('short', 'long'),
  defaultNodes: fc.constantFrom('left-out', 'written'),
  space: fc.constantFrom('', ' '),
  channels: fc.constantFrom('bare', 'block'),
});

/** Six digits and a power of ten: all of them are in a reply of six digits behind the point. */
const decimals = fc
  .tuple(fc.integer({ min: -999_999, max: 999_999 }), fc.integer({ min: -6, max: 3 }))
  .map(([digits, power]) => Number(`${digits}e${power}`));

const runs = { numRuns: 40 };
const readingsOf = (name: string, kind: 'number' | 'flag' | 'channel'): readonly string[] =>
  Object.entries(family(name).driver.readings)
    .filter(([, reading]) => reading.kind === kind)
    .map(([reading]) => reading);

const numbers = familyNames.flatMap((name) =>
  readingsOf(name, 'number').map((reading) => [name, reading] as const),
);
const switches = familyNames.flatMap((name) =>
  readingsOf(name, 'flag')
    .filter((reading) => reading.endsWith('-state'))
    .map((reading) => [name, reading] as const),
);
const functions = familyNames.flatMap((name) =>
  readingsOf(name, 'flag')
    .filter((reading) => reading.startsWith('measures-'))
    .map((reading) => [name, reading] as const),
);

describe('in whatever form an instrument writes it', () => {
  it.each(numbers)('%s reads the %s that is there', async (name, reading) => {
    await fc.assert(
      fc.asyncProperty(forms, decimals, async (form, value) => {
        const made = await opened(name, form);
        const shown = form.numbers === 'NR1' ? Math.trunc(value) : value;
        await setUp(made.opened, reading);
        made.measures(reading, shown);
        // No form makes a difference of a zero's sign, and none is meant.
        expect(Number(await readOn(made.opened, reading)) + 0).toBe(shown + 0);
        expect(made.instrument.errors.isEmpty).toBe(true);
      }),
      runs,
    );
  });

  it.each(numbers)(
    '%s takes no %s for a number that is beyond every range, or none',
    async (name, reading) => {
      await fc.assert(
        fc.asyncProperty(forms, fc.constantFrom(Infinity, -Infinity, NaN), async (form, value) => {
          const made = await opened(name, form);
          await setUp(made.opened, reading);
          made.measures(reading, value);
          expect(await readOn(made.opened, reading)).toBe(Number.isNaN(value) ? 'not-a-number' : 'overload');
        }),
        runs,
      );
    },
  );

  it.each(switches)('%s tells by the %s whether it is on', async (name, reading) => {
    await fc.assert(
      fc.asyncProperty(forms, fc.boolean(), async (form, on) => {
        const made = await opened(name, form);
        await made.opened.perform(`${reading.replace('-state', '')}-${on ? 'on' : 'off'}`);
        expect(await readOn(made.opened, reading)).toBe(on);
      }),
      runs,
    );
  });

  it.each(functions)('%s tells by %s what it is set to', async (name, reading) => {
    const meant: MeterFunction = reading === 'measures-voltage' ? 'VOLTage[:DC]' : 'RESistance';
    const all = ['VOLTage[:DC]', 'VOLTage:AC', 'RESistance', 'FRESistance'] as const;
    await fc.assert(
      fc.asyncProperty(forms, fc.constantFrom(...all), async (form, to) => {
        const made = await opened(name, form);
        made.function?.set(to);
        expect(await readOn(made.opened, reading)).toBe(to === meant);
      }),
      runs,
    );
  });

  it('scanner-route-scpi finds the closed channel, none, or that there are too many', async () => {
    const channels = fc.uniqueArray(fc.constantFrom(101, 102, 103, 104));
    await fc.assert(
      fc.asyncProperty(forms, channels, async (form, closed) => {
        const made = await opened('scanner-route-scpi', form);
        for (const channel of closed) made.closed?.add(channel);
        const read = readOn(made.opened, 'closed-channel');
        if (closed.length > 1) await expect(read).rejects.toMatchObject({ code: 'REPLY_NOT_UNDERSTOOD' });
        else expect(await read).toBe(closed[0] ?? null);
      }),
      runs,
    );
  });

  it.each(familyNames.filter((name) => family(name).driver.errors !== 'none'))(
    '%s finds an error on the queue, and finds it clear',
    async (name) => {
      await fc.assert(
        fc.asyncProperty(forms, async (form) => {
          const made = family(name, form);
          // Before it is opened, and so an error from before: told, not held against it.
          for (const { text } of made.driver.remote) made.instrument.write(text);
          made.instrument.write('NONSENSE');
          const session = await opened(name, form, made);
          expect(session.notices).toEqual([expect.stringContaining('-113 "Undefined header"')]);
          expect(made.instrument.errors.isEmpty).toBe(true);
        }),
        runs,
      );
    },
  );
});

/** A meter that is set first measures what it is set to. */
async function setUp(
  instrument: Awaited<ReturnType<typeof opened>>['opened'],
  reading: string,
): Promise<void> {
  const operation = `measure-${reading}`;
  if (instrument.has(operation)) await instrument.perform(operation);
}
