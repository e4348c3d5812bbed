import { sourceAtRest } from '../virtual-source.js';
import type { Dialect } from './dialect.js';
import { booleanSetting, numberSetting, question } from './scpi-commands.js';
import { ScpiInterpreter } from './scpi-interpreter.js';
import { nr3 } from './scpi-number.js';

/** A dc source of the standard subsystems: OUTPut, VOLTage, CURRent, MEASure. */
export const dcSource: Dialect = {
  name: 'dc-source',
  role: 'source',
  replyEnd: '\n',
  wake: (hands) =>
    new ScpiInterpreter({
      identity: hands.identity,
      reset: () => {
        hands.set(sourceAtRest);
      },
      commands: [
        booleanSetting(
          'OUTPut[:STATe]',
          () => hands.state().output === 'on',
          (on) => {
            hands.set({ output: on ? 'on' : 'off' });
          },
        ),
        numberSetting(
          '[SOURce:]VOLTage[:LEVel][:IMMediate][:AMPLitude]',
          { unit: 'V', least: 0, most: hands.most.voltage },
          () => hands.state().setVoltage,
          (setVoltage) => {
            hands.set({ setVoltage });
          },
        ),
        numberSetting(
          '[SOURce:]CURRent[:LEVel][:IMMediate][:AMPLitude]',
          { unit: 'A', least: 0, most: hands.most.current },
          () => hands.state().setCurrent,
          (setCurrent) => {
            hands.set({ setCurrent });
          },
        ),
        question('MEASure[:SCALar]:VOLTage[:DC]', () => nr3(hands.measure('voltage')), 2),
        question('MEASure[:SCALar]:CURRent[:DC]', () => nr3(hands.measure('current')), 2),
      ],
    }),
};
