import type { Dialect } from './dialect.js';
import { question } from './scpi-commands.js';
import { ScpiInterpreter } from './scpi-interpreter.js';
import { nr3 } from './scpi-number.js';

/** A meter that configures itself and measures by one query, MEASure:VOLTage?, however it was set before. */
export const queryMeter: Dialect = {
  name: 'query-meter',
  role: 'meter',
  replyEnd: '\n',
  wake: (hands) =>
    new ScpiInterpreter({
      identity: hands.identity,
      reset: () => undefined,
      commands: [
        question('MEASure[:SCALar]:VOLTage[:DC]', () => nr3(hands.measure('voltage')), 2),
        question('MEASure[:SCALar]:RESistance', () => nr3(hands.measure('resistance')), 2),
      ],
    }),
};
