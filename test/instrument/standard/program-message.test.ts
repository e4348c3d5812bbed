import { describe, expect, it } from 'vitest';
import reference from '../../../fixtures/reference/scpi-488.json' with { type: 'json' };
import { header, numbersIn } from './header.js';
import { fromRoot } from './header-path.js';
import { channelList, boolean, numeric, oneOf, whole } from './parameters.js';
import { programMessage } from './program-message.js';

const errorOf = (act: () => unknown): number | undefined => {
  try {
    act();
  } catch (error) {
    return (error as { number: number }).number;
  }
  return undefined;
};
const dataOf = (message: string) => [...programMessage(message)].flatMap(({ data }) => data);

// Source: IEEE Std 488.2 and SCPI-1999 as fixtures/reference/scpi-488.json states them.
describe('a header', () => {
  it.each(reference.header_forms.examples)('is $long or $short and nothing between', ({ long, short }) => {
    const printed = short + long.slice(short.length).toLowerCase();
    const isMeant = (word: string): boolean => numbersIn(header(printed), [word]) !== undefined;
    for (let length = 1; length <= long.length; length++) {
      const word = long.slice(0, length);
      expect(isMeant(word)).toBe(word === long || word === short);
      expect(isMeant(word.toLowerCase())).toBe(isMeant(word));
    }
  });

  it.each([
    ['CURR', true],
    ['CURR:LEV', true],
    ['SOUR:CURR', true],
    ['source:current:level:immediate:amplitude', true],
    ['CURR:AMPL', true],
    ['SOUR', false],
    ['CURR:AMPL:LEV', false],
    ['CURR:LEV:LEV', false],
    ['CURR1', false],
  ])('may leave out its default nodes, and no others: %s', (spoken, isMeant) => {
    const nodes = header('[SOURce:]CURRent[:LEVel][:IMMediate][:AMPLitude]');
    expect(numbersIn(nodes, spoken.split(':')) !== undefined).toBe(isMeant);
  });

  it.each([
    ['OUTP', [1]],
    ['OUTP2:STAT', [2]],
    ['OUTPUT02', [2]],
    ['OUTPU1', undefined],
  ])('has a number where there are several, and the first needs none: %s', (spoken, numbers) => {
    expect(numbersIn(header('OUTPut<2>[:STATe]'), spoken.split(':'))).toEqual(numbers);
  });

  it.each(['OUTP3', 'OUTP0'])('is out of range with a number that is not there: %s', (spoken) => {
    expect(errorOf(() => numbersIn(header('OUTPut<2>[:STATe]'), [spoken]))).toBe(-114);
  });
});

describe('a compound message', () => {
  it.each(reference.compound_messages.expansions)('$message', ({ message, expands_to: full }) => {
    let path: readonly string[] = [];
    const expanded = [...programMessage(message)].map((unit) => {
      const found = fromRoot(unit, path);
      ({ path } = found);
      return found.words.join(':') + (unit.isQuery ? '?' : '');
    });
    expect(expanded).toEqual(full.map((each) => each.split(' ')[0]));
  });

  it('may have white space around its separators, and its case is kept for what is in quotes', () => {
    expect([...programMessage("\t CURR 2.5 ; :func  \"Volt\" , 'it''s' \r")]).toEqual([
      {
        kind: 'compound',
        fromRoot: false,
        words: ['CURR'],
        isQuery: false,
        data: [{ kind: 'number', value: 2.5, suffix: '' }],
      },
      {
        kind: 'compound',
        fromRoot: true,
        words: ['func'],
        isQuery: false,
        data: [
          { kind: 'string', text: 'Volt' },
          { kind: 'string', text: "it's" },
        ],
      },
    ]);
    expect([...programMessage('  ')]).toEqual([]);
  });

  // The standard's own examples among them: SETUP&, *GMC"MACRO", *EMC 1:CH1:VOLTS 5.
  it.each([
    ['SETUP&', -101],
    ['%$!', -101],
    ['CURR 1;', -102],
    ['CURR 1;;INP ON', -102],
    ['12', -102],
    ['CURR ,1', -102],
    ['*EMC 1:CH1:VOLTS 5', -103],
    ['CURR 1 2', -103],
    ['*GMC"MACRO"', -111],
    ['CURR+1', -111],
    ['PROGRAMMABLES 1', -112],
    ['CURR +', -120],
    ['CURR 1..5', -121],
    ['CURR #B12', -121],
    ['CURR 1E32001', -123],
    [`CURR ${'1'.repeat(256)}`, -124],
    ['CURR 1 MICROAMPERESS', -134],
    ['FUNC ABCDEFGHIJKLM', -144],
    ['FUNC "VOLT', -151],
    ['ROUT:CLOS (@101', -171],
  ])('that breaks the grammar is refused with its number: %s', (message, number) => {
    expect(errorOf(() => [...programMessage(message)])).toBe(number);
  });

  it('is whole up to its mistake', () => {
    const units = programMessage('INP ON;CURR+1');
    expect(units.next().value).toMatchObject({ words: ['INP'] });
    expect(errorOf(() => units.next())).toBe(-111);
  });
});

describe('data', () => {
  const amps = numeric('A', { least: 0, most: 10, default: 1 });
  const ohms = numeric('OHM', { least: 0, most: 1e9 });
  const only = (text: string) => dataOf(`X ${text}`)[0] ?? { kind: 'block' as const };

  it.each([
    ['2.5', 2.5],
    ['+2.5', 2.5],
    ['.25', 0.25],
    ['3.', 3],
    ['25E-1', 2.5],
    ['2.5 e +0', 2.5],
    ['2.5 A', 2.5],
    ['2.5a', 2.5],
    ['250 MA', 0.25],
    ['250ma', 0.25],
    ['1e3 uA', 0.001],
    ['MIN', 0],
    ['maximum', 10],
    ['DEF', 1],
    ['#H0A', 10],
    ['#q7', 7],
    ['#B101', 5],
  ])('that is a number: %s', (text, value) => {
    expect(amps(only(text))).toBeCloseTo(value, 12);
  });

  it.each([
    ['1.5KOHM', 1500],
    ['2 MOHM', 2e6],
    ['2 maohm', 2e6],
  ])('whose M is a million for ohms: %s', (text, value) => {
    expect(ohms(only(text))).toBe(value);
  });

  it.each([
    [amps, '2 V', -131],
    [amps, '250 M', -131],
    [amps, '2 XA', -131],
    [amps, '11', -222],
    [amps, '-1', -222],
    [amps, 'MUCH', -224],
    [amps, 'MAXI', -224],
    [amps, '"2"', -104],
    [amps, '#12ab', -104],
    [amps, '(@1)', -104],
    [whole({ least: 0, most: 255 }), '1 V', -138],
    [whole({ least: 0, most: 255 }), '256', -222],
    [boolean, 'MAYBE', -224],
    [boolean, '1 V', -138],
    [boolean, '"ON"', -104],
    [oneOf('CURRent', 'VOLTage'), 'CURRE', -224],
    [oneOf('CURRent', 'VOLTage'), '1', -104],
    [channelList([101]), '101', -104],
    [channelList([101]), '(101)', -171],
    [channelList([101]), '(@101;)', -171],
    [channelList([101]), '(@102)', -222],
  ])('%# that is not what is wanted: %s', (parameter, text, number) => {
    expect(errorOf(() => parameter(only(text) as never))).toBe(number);
  });

  it.each([
    ['ON', true],
    ['off', false],
    ['1', true],
    ['0', false],
    ['0.4', false],
    ['-2.7E0', true],
  ])('that is a yes or a no: %s', (text, value) => {
    expect(boolean(only(text))).toBe(value);
  });

  it.each([
    ['(@)', []],
    ['(@101)', [101]],
    ['( @ 101 , 103 )', [101, 103]],
    ['(@101:103)', [101, 102, 103]],
    ['(@103:101,101)', [103, 102, 101, 101]],
  ])('that is a list of channels: %s', (text, channels) => {
    expect(channelList([101, 102, 103])(only(text))).toEqual(channels);
  });
});
