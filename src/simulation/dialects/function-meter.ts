import type { Dialect, MeterHands, MeterMode } from './dialect.js';
import { order, type Outcome, question, type ScpiCommand } from './scpi-commands.js';
import { ScpiErrorNumber } from './scpi-errors.js';
import { headerPattern, matchesHeader } from './scpi-header.js';
import { ScpiInterpreter } from './scpi-interpreter.js';
import { nr3 } from './scpi-number.js';

const functions: readonly { readonly mode: MeterMode; readonly named: string; readonly answer: string }[] = [
  { mode: 'voltage', named: 'VOLTage[:DC]', answer: '"VOLT:DC"' },
  { mode: 'resistance', named: 'RESistance', answer: '"RES"' },
];

/** A meter whose function is a text in quotes; READ? starts a measurement and answers it, FETCh? answers it again. */
export const functionMeter: Dialect = {
  name: 'function-meter',
  role: 'meter',
  replyEnd: '\n',
  wake: (hands) => {
    let kept = Number.NaN;
    const measure = (): void => {
      kept = hands.measure(hands.mode());
    };
    return new ScpiInterpreter({
      identity: hands.identity,
      reset: () => {
        hands.setMode('voltage');
      },
      commands: [
        functionSetting(hands),
        order('INITiate[:IMMediate]', measure),
        question('FETCh', () => nr3(kept)),
        question('READ', () => {
          measure();
          return nr3(kept);
        }),
      ],
    });
  },
};

function functionSetting(hands: MeterHands): ScpiCommand {
  const error = (number: number): Outcome => ({ kind: 'error', number });
  return {
    header: headerPattern('[SENSe:]FUNCtion[:ON]'),
    tell: ([text, ...extra]) => {
      if (text === undefined) return error(ScpiErrorNumber.missingParameter);
      if (extra.length > 0) return error(ScpiErrorNumber.parameterNotAllowed);
      const [, , name] = /^(["'])([\w:]*)\1$/.exec(text) ?? [];
      if (name === undefined) return error(ScpiErrorNumber.dataType);
      const found = functions.find(({ named }) => matchesHeader(headerPattern(named), name.split(':')));
      if (found === undefined) return error(ScpiErrorNumber.illegalValue);
      hands.setMode(found.mode);
      return { kind: 'done' };
    },
    ask: ([extra]) =>
      extra === undefined
        ? { kind: 'reply', text: functions.find(({ mode }) => mode === hands.mode())?.answer ?? '""' }
        : error(ScpiErrorNumber.parameterNotAllowed),
  };
}
