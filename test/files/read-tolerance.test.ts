import { readdirSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { vocabulary as whole } from '../../src/cli/vocabulary.js';
import { parseTolerance, readTolerance } from '../../src/files/read-tolerance.js';
import { toleranceExample, vocabulary } from './design-examples.js';
import { problemsOf } from './problems-of.js';

const parse = (text: string) => parseTolerance(text, 'mine.yaml', vocabulary);
const withEntry = (entry: string): string =>
  `railproof: tolerance 1\nname: mine\ntitle: Mine\nfindings:\n  - ${entry}\n`;

it('a tolerance is read', () => {
  expect(parse(toleranceExample)).toEqual({
    name: 'earth-link-removed',
    title: 'After removing the earth link and adding a reverse diode',
    findings: [
      { finding: 'earth-relation', expected: { kind: 'becomes', word: 'isolated' } },
      {
        finding: 'open-circuit-voltage',
        expected: { kind: 'within', limit: { kind: 'share', ratio: 0.005 } },
      },
      { finding: 'limit-style', expected: { kind: 'same' } },
    ],
  });
});

it.each([
  ['{ finding: open-circuit-voltage, within: 50 mV }', { kind: 'absolute', value: 0.05 }],
  ['{ finding: load-regulation, within: 20 % }', { kind: 'share', ratio: 0.2 }],
  ['{ finding: load-regulation, within: 2 percentage points }', { kind: 'absolute', value: 0.02 }],
  ['{ finding: load-regulation, within: 1 percentage point }', { kind: 'absolute', value: 0.01 }],
  ['{ finding: share-of-*, within: 5 % }', { kind: 'share', ratio: 0.05 }],
  ['{ finding: share-of-K2, within: 5 % }', { kind: 'share', ratio: 0.05 }],
])('%s', (entry, limit) => {
  expect(parse(withEntry(entry)).findings[0]?.expected).toEqual({ kind: 'within', limit });
});

describe('one mistake is one line, at its place', () => {
  it.each([
    ['{ finding: droop, within: 5 % }', "5:16: findings.0.finding: no finding is called 'droop'"],
    [
      '{ finding: usable-curent, within: 5 % }',
      "5:16: findings.0.finding: no finding is called 'usable-curent'; did you mean 'usable-current'?",
    ],
    ["{ finding: '*', within: 5 % }", "5:16: findings.0.finding: no finding is called '*'"],
    [
      '{ finding: usable-current, within: 5 }',
      '5:40: findings.0.within: found the bare number 5; a current needs its unit: 4 A, 400 mA',
    ],
    [
      '{ finding: usable-current, within: 5 V }',
      "5:40: findings.0.within: found '5 V', which is a voltage; a current is needed: 4 A, 400 mA",
    ],
    [
      '{ finding: usable-current, within: 2 percentage points }',
      "5:40: findings.0.within: found '2 percentage points'; no unit is written 'percentage points'; a current is given in µA, mA, A",
    ],
    [
      '{ finding: usable-current, within: 0 % }',
      "5:40: findings.0.within: found '0 %'; more than nothing is needed",
    ],
    [
      '{ finding: usable-current, within: -50 mA }',
      "5:40: findings.0.within: found '-50 mA'; more than nothing is needed",
    ],
    [
      '{ finding: usable-current, same: true }',
      '5:38: findings.0.same: usable-current is a quantity; write within: in place of same:',
    ],
    [
      '{ finding: limit-style, within: 5 % }',
      '5:37: findings.0.within: limit-style is a word; write same: or becomes: in place of within:',
    ],
    ['{ finding: limit-style, same: false }', "5:35: findings.0.same: found false; 'true' is needed"],
    [
      '{ finding: limit-style, becomes: foldbak }',
      "5:38: findings.0.becomes: limit-style is never 'foldbak'; did you mean 'foldback'?",
    ],
    [
      '{ finding: limit-style, becomes: 4 }',
      '5:38: findings.0.becomes: found the number 4; a word is needed',
    ],
    ['{ finding: limit-style }', '5:5: findings.0: a finding has exactly one of within, same, becomes'],
    [
      '{ finding: limit-style, same: true, becomes: hiccup }',
      '5:5: findings.0: a finding has exactly one of within, same, becomes',
    ],
    ['{ finding: limit-style, sam: true }', "5:29: findings.0: unknown key 'sam'; did you mean 'same'?"],
    [
      '{ finding: limit-style, same: true }\n  - { finding: limit-style, becomes: hiccup }',
      "6:16: findings.1.finding: 'limit-style' stands here twice",
    ],
  ])('%s', (entry, problem) => {
    expect(problemsOf(() => parse(withEntry(entry)))).toEqual([`mine.yaml:${problem}`]);
  });

  it('and what is missing is told', () => {
    expect(problemsOf(() => parse('railproof: tolerance 1\nname: mine\nfindings: []\n'))).toEqual([
      'mine.yaml:1:1: title: missing; a text is needed',
      'mine.yaml:3:11: findings: found 0 of them; at least 1 are needed',
    ]);
  });
});

describe('a shipped tolerance', () => {
  const shipped = readdirSync('procedures/tolerances')
    .filter((file) => file.endsWith('.yaml'))
    .map((file) => file.slice(0, -'.yaml'.length));
  const shelves = { relativeTo: '.', shipped: 'procedures/tolerances' };

  it.each(shipped)('%s is read by its name', async (name) => {
    const { value, path } = await readTolerance(name, whole, shelves);
    expect(value.name).toBe(name);
    expect(path).toBe(`procedures/tolerances/${name}.yaml`);
  });

  it('are those that the programs go by', () => {
    expect(shipped).toEqual(expect.arrayContaining(['unchanged', 'earth-link-removed']));
  });

  it('after removing the earth link asks for isolation, and allows no more than unchanged does', async () => {
    const [{ value: removed }, { value: unchanged }] = (await Promise.all(
      ['earth-link-removed', 'unchanged'].map((name) => readTolerance(name, whole, shelves)),
    )) as [Awaited<ReturnType<typeof readTolerance>>, Awaited<ReturnType<typeof readTolerance>>];
    const [earth, ...rest] = removed.findings;
    expect(earth).toEqual({ finding: 'earth-relation', expected: { kind: 'becomes', word: 'isolated' } });
    expect(unchanged.findings).toEqual(expect.arrayContaining(rest));
  });

  it('that is not there is missed by its name', async () => {
    await expect(readTolerance('earth-link-remove', whole, shelves)).rejects.toThrow(
      "no tolerance is called 'earth-link-remove'; did you mean 'earth-link-removed'?",
    );
  });
});
