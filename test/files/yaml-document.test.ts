import { describe, expect, it } from 'vitest';
import { stringify } from 'yaml';
import { BadFileError } from '../../src/files/file-error.js';
import { parseYaml } from '../../src/files/yaml-document.js';
import fc from '../property.js';
import { problemsOf } from './problems-of.js';

const refused = (text: string): string[] => problemsOf(() => parseYaml(text, 'a.yaml'));

describe('YAML 1.2, core schema, is what is read', () => {
  it.each<[string, unknown]>([
    ['a: yes', { a: 'yes' }],
    ['a: 12:30', { a: '12:30' }],
    ['a: 2026-11-14', { a: '2026-11-14' }],
    ['a: 0x10', { a: 16 }],
    ['a: true', { a: true }],
    ['a:', { a: null }],
    ['1: a', { '1': 'a' }],
    ['a: 5 %', { a: '5 %' }],
    ['a: { b: 5 s, c: [1, 2] }', { a: { b: '5 s', c: [1, 2] } }],
    ['a: "\\n"', { a: '\n' }],
    ['<<: { a: 1 }', { '<<': { a: 1 } }],
    ['a: &x { b: 1 }\nc: *x', { a: { b: 1 }, c: { b: 1 } }],
    ['\ufeffa: 1', { a: 1 }],
    ['# only a comment', null],
    ['', null],
  ])('%j', (text, value) => {
    expect(parseYaml(text, 'a.yaml').value).toEqual(value);
  });

  it('a key that is the name of a trap is a key like any other', () => {
    const { value } = parseYaml('__proto__: { polluted: true }\nconstructor: 1', 'a.yaml');
    expect(Object.keys(value as object)).toEqual(['__proto__', 'constructor']);
    expect(({} as Record<string, unknown>)['polluted']).toBeUndefined();
  });
});

describe('what cannot be read is told at its place', () => {
  it.each<[string, string]>(
    [
      ['a: 1\nb: 2\na: 3', "a.yaml:3:1: the key 'a' stands here a second time"],
      ['x:\n  - { b: 1, "b": 2 }', "a.yaml:2:13: the key 'b' stands here a second time"],
      ['a: 1\n---\nb: 2', "a.yaml:2:1: a second document begins here ('---'); a file holds one"],
      ['a: !foo 1', "a.yaml:1:4: tags such as '!name' are not read here"],
      ['a: !!binary aGk=', 'a.yaml:1:13: tags are not read here; found one before this value'],
      ['a: !!str 4', 'a.yaml:1:10: tags are not read here; found one before this value'],
      ['? [a]\n: 1', 'a.yaml:1:3: a key must be a plain text'],
      ['a:\n\tb: 1', 'a.yaml:2:1: a tab stands here as indentation; YAML wants spaces'],
      [
        'a: b: c',
        "a.yaml:1:4: not valid YAML: a second ': ' on one line; put a text that holds one in quotes",
      ],
      ['a: *x', "a.yaml:1:4: no anchor '&x' stands before this alias"],
      ['a: &x [*x]', "a.yaml:1:8: the alias '*x' leads into itself"],
      ['%YAML 1.1\n---\na: yes', 'a.yaml:1:1: YAML 1.1 is not read, only YAML 1.2'],
      [
        'a: % of x',
        'a.yaml:1:4: not valid YAML: Plain value cannot start with directive indicator character %',
      ],
      [
        'a: {b: 1',
        'a.yaml:1:9: not valid YAML: wrong indentation, or a bracket that is not closed before here',
      ],
      ['a: "b', 'a.yaml:1:6: not valid YAML: a quote, bracket, comma or colon is missing about here'],
    ].filter((row): row is [string, string] => row[1] !== undefined),
  )('%j', (text, message) => {
    expect(refused(text)).toEqual([message]);
  });

  it('each repeated key is told, all at once', () => {
    expect(refused('a: 1\na: 2\nb: { c: 1, c: 2 }')).toEqual([
      "a.yaml:2:1: the key 'a' stands here a second time",
      "a.yaml:3:12: the key 'c' stands here a second time",
    ]);
  });
});

describe('a file made to do harm is refused in a moment', () => {
  const bomb = [
    'railproof: module 1',
    'a: &a [x, x, x, x, x, x, x, x, x, x]',
    ...['b', 'c', 'd', 'e', 'f', 'g', 'h', 'i'].map((each, index) => {
      const before = 'abcdefgh'.charAt(index);
      return `${each}: &${each} [${Array.from({ length: 10 }, () => `*${before}`).join(', ')}]`;
    }),
  ].join('\n');

  it('an alias bomb, at the alias that is too much', () => {
    expect(refused(bomb)).toEqual(['a.yaml:6:8: the aliases up to here expand to too many values']);
  });

  it.each([
    ['brackets', '['.repeat(100_000)],
    ['maps', '{a: '.repeat(60_000)],
    ['lists in lists', '- '.repeat(100_000)],
    ['keys of keys', '? '.repeat(100_000)],
  ])('nesting without end: %s', (_, text) => {
    expect(refused(text)).toEqual([expect.stringMatching(/^a\.yaml:1:\d+: nested too deeply$/)]);
  });

  it('more keys than a file could have', () => {
    const text = Array.from({ length: 20_000 }, (_, index) => `k${index}: 1`).join('\n');
    expect(refused(text)).toEqual(['a.yaml:10001:1: more values than any file of this kind needs']);
  });

  it('more text than a file could have', () => {
    expect(refused(`a: "${'x'.repeat(300_000)}"`)).toEqual([
      'a.yaml:1:1: larger than 256 KiB; is this the right file?',
    ]);
  });

  it.each([
    ['a: 1 # \u001b[2J', 'a.yaml:1:8: a character stands here that cannot be shown (U+001B)'],
    ['a: 1\nb: "\u202e"', 'a.yaml:2:5: a character stands here that cannot be shown (U+202E)'],
    ['a:\n  - \u0000', 'a.yaml:2:5: a character stands here that cannot be shown (U+0000)'],
    ['# \u2066', 'a.yaml:1:3: a character stands here that cannot be shown (U+2066)'],
  ])('what would steer a terminal, in a comment too: %j', (text, problem) => {
    expect(refused(text)).toEqual([problem]);
  });

  it.each<[string, (length: number) => string]>([
    ['runs of blanks between dashes', (n) => `- ${' '.repeat(500)}`.repeat(n / 502)],
    ['dashes', (n) => `${'- '.repeat(63)}x\n`.repeat(n / 128)],
    ['blanks', (n) => `a:${' '.repeat(n - 4)}b`],
    ['empty lines', (n) => `a: |\n${'\n'.repeat(n - 10)} b`],
    ['one long key', (n) => `${'k'.repeat(n - 4)}: 1`],
    ['one long quoted text', (n) => `a: "${'\\u0041'.repeat((n - 8) / 6)}"`],
    ['quotes', (n) => `a: ${"'".repeat(n - 4)}`],
    ['anchors', (n) => `- &a${'b'.repeat(20)} x\n`.repeat(n / 28)],
    ['aliases', (n) => `- &a x\n${'- *a\n'.repeat(n / 5 - 2)}`],
    ['keys', (n) => Array.from({ length: n / 12 }, (_, index) => `k${index}: 1`).join('\n')],
    ['maps on a line', (n) => `a: [${'{b: 1},'.repeat(n / 7 - 2)}]`],
    ['brackets', (n) => '['.repeat(n)],
    ['colons', (n) => ':'.repeat(n)],
    ['comments', (n) => '#\n'.repeat(n / 2)],
    ['directives', (n) => '%a b\n'.repeat(n / 5)],
    ['merges', (n) => `a: &a {b: 1}\n${'<<: *a\n'.repeat(n / 7 - 2)}`],
    ['tags', (n) => '- !a x\n'.repeat(n / 7)],
    ['folds', (n) => `a: >\n${'  b\n\n'.repeat(n / 5 - 2)}`],
  ])('as much as may be read of %s takes no longer than a moment', (_, textOf) => {
    const text = textOf(256 * 1024);
    expect(text.length).toBeLessThanOrEqual(256 * 1024);
    const began = process.cpuUsage();
    try {
      parseYaml(text, 'a.yaml');
    } catch (error) {
      expect(error).toBeInstanceOf(BadFileError);
    }
    const { user, system } = process.cpuUsage(began);
    // A second on a machine of its own; here others work beside it.
    expect((user + system) / 1e6).toBeLessThan(8);
  });

  it('any text at all is read, or refused as a bad file', () => {
    const text = fc.array(
      fc.constantFrom(
        'a',
        ': ',
        '- ',
        '[',
        ']',
        '{',
        '}',
        '\n',
        '  ',
        '&a ',
        '*a',
        '"',
        "'",
        '#',
        '!x ',
        '|',
        '%',
        '\t',
        'é',
        '\u0000',
      ),
      { maxLength: 30 },
    );
    fc.assert(
      fc.property(text, (parts) => {
        try {
          expect(parseYaml(parts.join(''), 'a.yaml').fileName).toBe('a.yaml');
        } catch (error) {
          expect(error).toBeInstanceOf(BadFileError);
        }
      }),
      { numRuns: 500 },
    );
  });
});

describe('a place is found by the way that leads there', () => {
  const text = [
    'railproof: module 1',
    'rated:',
    '  voltage: 15 V',
    'steps:',
    '  - wait: { for: 5 s }',
    '  - x: *a',
  ].join('\n');
  const document = parseYaml(text.replace('5 s', '&a 5 s'), 'a.yaml');
  const at = (path: PropertyKey[], key?: string): string => {
    const { line, column } = document.place({ path, message: '', ...(key === undefined ? {} : { key }) });
    return `${line}:${column}`;
  };

  it.each<[PropertyKey[], string | undefined, string]>([
    [[], undefined, '1:1'],
    [['rated', 'voltage'], undefined, '3:12'],
    [['rated'], 'voltage', '3:3'],
    // What is missing is told at the map that lacks it.
    [['rated', 'current'], undefined, '3:3'],
    [['steps', 0], undefined, '5:5'],
    [['steps', 0, 'wait', 'for'], undefined, '5:21'],
    [['steps', 0, 'wait'], 'for', '5:13'],
    [['steps', 7], undefined, '5:3'],
    // What an alias stands for is told at the alias.
    [['steps', 1, 'x', 'deeper'], undefined, '6:8'],
    [['nowhere', 'at', 'all'], undefined, '1:1'],
  ])('%j %s', (path, key, place) => {
    expect(at(path, key)).toBe(place);
  });

  it('for every value of every file', () => {
    const leaf = fc.stringMatching(/^[a-z]{1,6}$/);
    const { tree } = fc.letrec<{ tree: unknown }>((tie) => ({
      tree: fc.oneof(
        { depthSize: 'small' },
        leaf,
        fc.array(tie('tree'), { maxLength: 4 }),
        fc.dictionary(leaf, tie('tree'), { maxKeys: 4 }),
      ),
    }));
    fc.assert(
      fc.property(tree, fc.boolean(), (value, flow) => {
        const written = stringify(value, { collectionStyle: flow ? 'flow' : 'block', lineWidth: 0 });
        const read = parseYaml(written, 'a.yaml');
        const lines = written.split('\n');
        for (const { path, text: expected } of leavesOf(value, [])) {
          const { line, column } = read.place({ path, message: '' });
          const rest = (lines[line - 1] ?? '').slice(column - 1).replace(/^"/, '');
          expect(rest.startsWith(expected)).toBe(true);
        }
      }),
    );
  });
});

function leavesOf(value: unknown, path: PropertyKey[]): { path: PropertyKey[]; text: string }[] {
  if (typeof value === 'string') return [{ path, text: value }];
  if (Array.isArray(value)) return value.flatMap((each, index) => leavesOf(each, [...path, index]));
  return Object.entries(value as object).flatMap(([key, each]) => leavesOf(each, [...path, key]));
}
