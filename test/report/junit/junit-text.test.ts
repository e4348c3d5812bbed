import { describe, expect, it } from 'vitest';
import { asXml, junitMark, junitText } from '../../../src/report/junit/junit-text.js';
import type { Case, Suite } from '../../../src/report/junit/suite.js';
import fc from '../../property.js';
import { counted, readJunit } from './read-junit.js';

/** Any text that a program can hold: halves of signs, controls, what ends a section of XML, and what begins markup. */
const anyText = fc
  .array(
    fc.oneof(
      fc.integer({ min: 0, max: 0xffff }).map((code) => String.fromCharCode(code)),
      fc.integer({ min: 0, max: 0x1f }).map((code) => String.fromCharCode(code)),
      fc.constantFrom(']]>', '<![CDATA[', '&', '&amp;', '<', '>', '"', "'", '\ud83d', '🪴', '\ufffe', '-->'),
    ),
    { maxLength: 12 },
  )
  .map((parts) => parts.join(''));

const anyCame = fc.oneof(
  fc.record({ kind: fc.constantFrom('passed' as const, 'skipped' as const), text: anyText }),
  fc.record({
    kind: fc.constantFrom('failure' as const, 'error' as const),
    type: fc.constantFrom('undecided', 'does-not-conform', 'stopped'),
    message: anyText,
  }),
);
const anyCase: fc.Arbitrary<Case> = fc.record({ name: anyText, group: anyText, came: anyCame });
const anySuite: fc.Arbitrary<Suite> = fc.record({
  name: anyText,
  began: fc.constant('2026-12-01T08:30:00.000Z'),
  lasted: fc.double({ min: 0, max: 1e6, noNaN: true }),
  properties: fc.array(fc.tuple(anyText, anyText), { maxLength: 4 }),
  cases: fc.array(anyCase, { maxLength: 5 }),
});

const plain: Suite = {
  name: '20261201T083000Z-K1-real-limit',
  began: '2026-12-01T08:30:00.000Z',
  lasted: 91.5,
  properties: [['module', 'K1']],
  cases: [
    { name: 'a', group: 'K1.real-limit', came: { kind: 'passed', text: 'so it is' } },
    { name: 'b', group: 'K1.real-limit', came: { kind: 'failure', type: 'undecided', message: 'who knows' } },
    { name: 'c', group: 'K1.real-limit', came: { kind: 'error', type: 'stopped', message: 'with Ctrl-C' } },
    { name: 'd', group: 'K1.real-limit', came: { kind: 'skipped', text: 'nothing asked' } },
  ],
};

/** XML 1.0, 2.11: a reader makes one line feed of each end of a line that stands in the text as it is. */
const endsOfLines = (text: string): string => text.replace(/\r\n?/g, '\n');

describe('a JUnit file', () => {
  it('says what each case came to, when the record was begun and how long it took', async () => {
    const { counts, suites } = readJunit(await junitText([plain]));
    expect(counts).toEqual({ tests: 4, failures: 1, errors: 1, skipped: 1 });
    expect(suites).toEqual([
      {
        name: plain.name,
        timestamp: plain.began,
        time: '91.5',
        counts,
        properties: [['module', 'K1']],
        cases: [
          { name: 'a', came: 'passed', out: 'so it is' },
          { name: 'b', came: 'failure', type: 'undecided', message: 'who knows' },
          { name: 'c', came: 'error', type: 'stopped', message: 'with Ctrl-C' },
          { name: 'd', came: 'skipped', out: 'nothing asked' },
        ].map((one) => ({
          group: 'K1.real-limit',
          time: '0',
          type: undefined,
          message: undefined,
          out: undefined,
          ...one,
        })),
      },
    ]);
  });

  it('begins as other commands know it again by', async () => {
    expect((await junitText([plain])).split('\n')[1]).toContain(junitMark);
  });

  it('is legal XML 1.0 whatever it was told, counts right, and gives every text back', async () => {
    await fc.assert(
      fc.asyncProperty(fc.array(anySuite, { maxLength: 3 }), async (suites) => {
        const { counts, suites: read } = readJunit(await junitText(suites));
        expect(counts).toEqual(counted(read));
        expect(read.map((suite) => suite.counts)).toEqual(read.map((suite) => counted([suite])));
        expect(read.map(({ name, properties }) => ({ name, properties }))).toEqual(
          suites.map(({ name, properties }) => ({
            name: asXml(name),
            properties: properties.map((pair) => pair.map(asXml)),
          })),
        );
        expect(read.flatMap(({ cases }) => cases)).toEqual(
          suites.flatMap(({ cases }) => cases).map((one) => expect.objectContaining(told(one)) as unknown),
        );
      }),
    );
  });
});

/** An empty text is not written. */
function told({ name, group, came }: Case): object {
  const common = { name: asXml(name), group: asXml(group), came: came.kind };
  const written = (text: string): string | undefined => (text === '' ? undefined : asXml(text));
  return 'text' in came
    ? { ...common, out: written(endsOfLines(came.text)) }
    : { ...common, type: came.type, message: written(came.message) };
}

describe('a text for XML', () => {
  it.each([
    ['K1, 15 V\t4 A\r\n', 'K1, 15 V\t4 A\r\n'],
    ['35 mΩ 🪴 \ue000 \u007f \ufdd0', '35 mΩ 🪴 \ue000 \u007f \ufdd0'],
    ['a\u0000b\u001b[2J\u000b', 'a\ufffdb\ufffd[2J\ufffd'],
    ['\ud83dx \udf00', '\ufffdx \ufffd'],
    ['\ufffe\uffff', '\ufffd\ufffd'],
  ])('of %j is %j', (text, xml) => {
    expect(asXml(text)).toBe(xml);
  });

  it('holds only what XML 1.0 allows, and is left alone a second time', () => {
    fc.assert(
      fc.property(anyText, (text) => {
        const xml = asXml(text);
        expect(xml).toMatch(/^[\t\n\r\u0020-\ud7ff\ue000-\ufffd\u{10000}-\u{10ffff}]*$/u);
        expect(asXml(xml)).toBe(xml);
      }),
    );
  });
});
