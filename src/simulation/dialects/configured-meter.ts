import type { Dialect } from './dialect.js';
import { configuration, question } from './scpi-commands.js';
import { ScpiInterpreter } from './scpi-interpreter.js';
import { nr3 } from './scpi-number.js';

/** A meter that is configured once, with CONFigure, and then read as often as wanted, with READ?. */
export const configuredMeter: Dialect = {
  name: 'configured-meter',
  role: 'meter',
  replyEnd: '\n',
  wake: (hands) => {
    let configured: 'voltage' | 'resistance' = 'voltage';
    return new ScpiInterpreter({
      identity: hands.identity,
      reset: () => {
        configured = 'voltage';
      },
      commands: [
        configuration('CONFigure[:SCALar]:VOLTage[:DC]', () => {
          configured = 'voltage';
        }),
        configuration('CONFigure[:SCALar]:RESistance', () => {
          configured = 'resistance';
        }),
        question('READ', () => nr3(hands.measure(configured))),
      ],
    });
  },
};
