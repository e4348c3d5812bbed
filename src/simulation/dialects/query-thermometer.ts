import type { Dialect } from './dialect.js';
import { question } from './scpi-commands.js';
import { ScpiInterpreter } from './scpi-interpreter.js';
import { nr3 } from './scpi-number.js';

/** A thermometer that measures by one query, in degrees Celsius: MEASure:TEMPerature?. */
export const queryThermometer: Dialect = {
  name: 'query-thermometer',
  role: 'thermometer',
  replyEnd: '\n',
  wake: (hands) =>
    new ScpiInterpreter({
      identity: hands.identity,
      reset: () => undefined,
      commands: [question('MEASure[:SCALar]:TEMPerature', () => nr3(hands.measure()), 2)],
    }),
};
