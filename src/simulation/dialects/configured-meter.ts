import type { Dialect } from './dialect.js';
import { configuration, question } from './scpi-commands.js';
import { ScpiInterpreter } from './scpi-interpreter.js';
import { nr3 } from './scpi-number.js';

/** As it names its function, range and resolution; the last two are automatic and say nothing here. */
const configured = {
  voltage: '"VOLT +1.000000E+02,+1.000000E-03"',
  resistance: '"RES +1.000000E+02,+1.000000E-03"',
};

/** A meter that is configured once, with CONFigure, and then read as often as wanted, with READ?. */
export const configuredMeter: Dialect = {
  name: 'configured-meter',
  role: 'meter',
  replyEnd: '\n',
  wake: (hands) =>
    new ScpiInterpreter({
      identity: hands.identity,
      reset: () => {
        hands.setMode('voltage');
      },
      commands: [
        configuration('CONFigure[:SCALar]:VOLTage[:DC]', () => {
          hands.setMode('voltage');
        }),
        configuration('CONFigure[:SCALar]:RESistance', () => {
          hands.setMode('resistance');
        }),
        question('CONFigure', () => configured[hands.mode()]),
        question('READ', () => nr3(hands.measure(hands.mode()))),
      ],
    }),
};
