import { describe, expect, it } from 'vitest';
import { channelLoad } from '../../../src/simulation/dialects/channel-load.js';
import { standardLoad } from '../../../src/simulation/dialects/standard-load.js';
import fc from '../../property.js';
import { type LoadBody, loadBody, loadTree } from '../../instrument/standard/load-tree.js';
import { StandardInstrument } from '../../instrument/standard/standard-instrument.js';
import { anyLoad } from './any-load.js';

const white = fc.constantFrom(' ', '  ', '\t', ' \t ');
const perhapsWhite = fc.constantFrom('', ' ', '\t');
const spelled = (text: string): fc.Arbitrary<string> =>
  fc
    .array(fc.boolean(), { minLength: text.length, maxLength: text.length })
    .map((lower) => text.replace(/./g, (each, at: number) => (lower[at] ? each.toLowerCase() : each)));

/** A word in its short or its long form, in any case. */
const word = (printed: string): fc.Arbitrary<string> =>
  fc.constantFrom(printed.replace(/[a-z]/g, ''), printed.toUpperCase()).chain(spelled);

/** A header with its default nodes or without, from the root. */
function header(printed: string): fc.Arbitrary<string> {
  const nodes = [...printed.matchAll(/(\[)?:?([A-Za-z]+):?\]?/g)].map(([, bracket, name = '']) =>
    bracket === undefined
      ? word(name).map((each) => [each])
      : fc.oneof(
          fc.constant<string[]>([]),
          word(name).map((each) => [each]),
        ),
  );
  return fc.tuple(...nodes).map((words) => words.flat().join(':'));
}

/** A number in any form that a device must take, with its unit or without. */
function number(unit: string): fc.Arbitrary<string> {
  const forms = fc.tuple(
    fc.integer({ min: 0, max: 39_999 }),
    fc.constantFrom('NR1', 'NR2', 'NR3'),
    fc.boolean(),
  );
  const written = forms.chain(([thousandths, form, plus]) => {
    const sign = plus ? '+' : '';
    const [one, thousand, thousandth] = ['', 'K', 'M'].map((multiplier) =>
      fc.tuple(perhapsWhite, spelled(multiplier + unit)).map((parts) => parts.join('')),
    );
    if (one === undefined || thousand === undefined || thousandth === undefined)
      throw new Error('three of them');
    const none = fc.constant('');
    if (form === 'NR1') return thousandth.map((suffix) => `${sign}${thousandths}${suffix}`);
    if (form === 'NR2') {
      return fc.oneof(none, one).map((suffix) => `${sign}${(thousandths / 1000).toFixed(3)}${suffix}`);
    }
    return fc.oneof(
      fc
        .tuple(spelled('E-3'), fc.oneof(none, one))
        .map(([e, suffix]) => `${sign}${thousandths}.0${e}${suffix}`),
      fc.tuple(spelled('E-6'), thousand).map(([e, suffix]) => `${sign}${thousandths}${e}${suffix}`),
    );
  });
  return fc.oneof({ weight: 6, arbitrary: written }, { weight: 1, arbitrary: word('MINimum') });
}

const boolean = fc.oneof(
  fc.constantFrom('ON', 'OFF').chain(spelled),
  fc.constantFrom('1', '0', '+1', '2.0', '0.2'),
);
const unit = (printed: string, data: fc.Arbitrary<string>): fc.Arbitrary<string> =>
  fc.tuple(header(printed), white, data, perhapsWhite).map((parts) => parts.join(''));

const units = fc.oneof(
  unit('INPut[:STATe]', boolean),
  unit('[SOURce:]FUNCtion[:MODE]', fc.oneof(word('CURRent'), word('VOLTage'))),
  unit('[SOURce:]CURRent[:LEVel][:IMMediate][:AMPLitude]', number('A')),
  unit('[SOURce:]VOLTage[:LEVel][:IMMediate][:AMPLitude]', number('V')),
  unit('[SOURce:]CURRent:PROTection[:LEVel]', number('A')),
);
/** Units one behind the other, each from the root, common commands between them. */
const messages = fc
  .array(fc.tuple(fc.boolean(), perhapsWhite, units), { minLength: 1, maxLength: 5 })
  .map((each) =>
    each
      .map(([common, space, text], at) => `${common ? '*WAI;' : ''}${space}${at === 0 ? '' : ':'}${text}`)
      .join(';'),
  );

describe('a simulated load', () => {
  it.each([standardLoad, channelLoad])(
    'takes all that is legal as the standard means it: $name',
    (dialect) => {
      fc.assert(
        fc.property(messages, (message) => {
          const body = { ...loadBody(), mode: 'CURRent' } as LoadBody;
          const byStandard = new StandardInstrument({ identity: 'K1', commands: loadTree(() => body) });
          byStandard.write(message);
          expect(byStandard.errors.isEmpty).toBe(true);
          const { load, state } = anyLoad(dialect);
          expect(load.hear(message), message).toEqual({ reply: undefined, understood: true });
          const { input, mode, setCurrent, setVoltage } = state();
          expect({ input: input === 'on', mode: mode === 'current' ? 'CURRent' : 'VOLTage' }).toEqual({
            input: body.input,
            mode: body.mode,
          });
          expect(setCurrent).toBeCloseTo(body.levels.CURRent, 9);
          expect(setVoltage).toBeCloseTo(body.levels.VOLTage, 9);
        }),
        { numRuns: 200 },
      );
    },
  );
});
