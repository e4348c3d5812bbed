import { describe, expect, it } from 'vitest';
import { type Finding, inWords, measured } from '../../src/analysis/finding.js';
import { promised } from '../../src/analysis/promised-errors.js';
import type { Dimension } from '../../src/quantity/quantity.js';
import { groupAnswer } from '../../src/report/group-answer.js';
import { resultAsJson } from '../../src/report/json.js';
import type { Result } from '../../src/report/result.js';
import { plainStyle } from '../../src/report/style.js';
import { resultAsText } from '../../src/report/text.js';
import { resultOf } from './fixed-record.js';

function found(name: string, dimension: Dimension, value: number, note = ''): Finding {
  return measured(name, dimension, value, [promised('a meter', value / 200)], { step: 2, note });
}
const said = (name: string, word: string, note: string): Finding => inWords(name, word, { step: 2, note });

function circuitOf(circuit: 'parallel' | 'series', ...findings: readonly Finding[]): Result {
  const result = resultOf();
  const [module] = result.header.modules;
  if (module === undefined) throw new Error('no module');
  const modules = ['K1', 'K2', 'K3'].map((name) => ({ ...module, name }));
  return { ...result, header: { ...result.header, circuit, modules }, findings };
}

describe('the answer about a group', () => {
  it('leads with what it holds and how it fails, then who hogs and why, then the ballast', () => {
    const current = found('group-current', 'current', 4.2, 'it fails at about what one of them holds');
    const result = circuitOf(
      'parallel',
      current,
      said(
        'hogging-module',
        'K1',
        'it carries 78 % of 4.00 A because its open-circuit voltage is 9 mV above K2’s',
      ),
      { ...found('recommended-ballast', 'resistance', 0.047, '47 mΩ ± 1 % in each'), interval: null },
    );
    expect(groupAnswer(result)).toEqual([
      'The group holds 4.200 ± 0.041 A; it fails at about what one of them holds.',
      'K1 hogs: it carries 78 % of 4.00 A because its open-circuit voltage is 9 mV above K2’s.',
      'As ballast take 47 mΩ ± 1 % in each.',
    ]);
  });

  it('says what is wrong with a ballast before it says that the rest can’t be told', () => {
    const result = circuitOf(
      'parallel',
      found('ballast-of-K2', 'resistance', 0.05, 'the bench file says 40 mΩ: measure it again'),
      said('hogging-module', 'undetermined', 'the currents add up to 8 A where the load takes 7 A'),
    );
    expect(groupAnswer(result)).toEqual([
      'The ballast of K2 is 50.00 ± 0.49 mΩ; the bench file says 40 mΩ: measure it again.',
      'Whether one of them hogs could not be told: the currents add up to 8 A where the load takes 7 A.',
    ]);
  });

  it.each([
    [
      said('hogging-module', 'none', 'the imbalance is 1 % to 3 %'),
      'They share the load: the imbalance is 1 % to 3 %.',
    ],
    [said('recommended-ballast', 'none', 'take closer ones'), 'No ballast would do: take closer ones.'],
    [
      said('recommended-ballast', 'undetermined', 'K2 carried too little'),
      'Which ballast would do could not be told: K2 carried too little.',
    ],
    [
      { ...found('recommended-ballast', 'resistance', 0, 'joined directly they do'), interval: null },
      'No ballast is needed: joined directly they do.',
    ],
    [
      { ...found('group-current', 'current', 8), bound: 'least' as const },
      'The group holds at least 8.000 ± 0.078 A.',
    ],
  ])('has words for every outcome: %#', (finding, words) => {
    expect(groupAnswer(circuitOf('parallel', finding))).toEqual([words]);
  });
});

describe('the answer about a stack', () => {
  it('says what it holds and gives, where its uppermost 0 V stands, and who gives way first', () => {
    const result = circuitOf(
      'series',
      found('group-current', 'current', 3.5),
      found('stack-voltage', 'voltage', 36.8),
      found('float-voltage-of-K2', 'voltage', 12.3),
      found('float-voltage-of-K3', 'voltage', 24.5, 'its output then stands at 36.8 V'),
      said('weakest-module', 'K2', 'it collapses at 3.60 A'),
    );
    expect(groupAnswer(result)).toEqual([
      'The string holds 3.500 ± 0.034 A.',
      'It gives 36.80 ± 0.36 V with no load.',
      'The 0 V of K3 floats 24.50 ± 0.24 V above that of the string; its output then stands at 36.8 V.',
      'What the outputs of K2 and K3 can withstand to earth is unknown: find that out before they float in use.',
      'The weakest is K2: it collapses at 3.60 A.',
    ]);
  });

  it.each([
    ['none', 'None of them gives way first: all held.'],
    ['undetermined', 'Which gives way first could not be told: all held.'],
  ])('has words for %s', (word, words) => {
    expect(groupAnswer(circuitOf('series', said('weakest-module', word, 'all held')))).toEqual([words]);
  });
});

describe('the report of several modules', () => {
  it('lists them all with their nameplates, how they are wired, and what they amount to', () => {
    const lines = resultAsText(circuitOf('series'), plainStyle).split('\n').slice(0, 5);
    expect(lines[0]).toBe('K1+K2+K3: What one module really delivers');
    expect(lines[1]).toBe('3 modules in series, the lowest first · together 45 V, 4 A');
    expect(lines.slice(2)).toEqual(
      ['K1', 'K2', 'K3'].map(
        (name) => expect.stringMatching(new RegExp(`^${name}: .*nameplate 15 V, 4 A$`)) as string,
      ),
    );
    expect(resultAsText(circuitOf('parallel'), plainStyle)).toContain(
      '3 modules in parallel · together 15 V, 12 A',
    );
  });

  it('tells a program of them in JSON', () => {
    expect(resultAsJson(circuitOf('parallel'))).toMatchObject({
      module: 'K1+K2+K3',
      circuit: 'parallel',
      modules: ['K1', 'K2', 'K3'],
    });
  });

  it('keeps quiet about a circuit where there is one module', () => {
    expect(groupAnswer(resultOf())).toEqual([]);
    expect(resultAsJson(resultOf())).not.toHaveProperty('circuit');
  });
});
