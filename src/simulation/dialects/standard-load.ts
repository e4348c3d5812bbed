import { loadAtRest } from '../virtual-load.js';
import type { Dialect } from './dialect.js';
import { loadCommands } from './load-commands.js';
import { ScpiInterpreter } from './scpi-interpreter.js';

/** A load of the standard subsystems: INPut, FUNCtion, CURRent, VOLTage, MEASure. */
export const standardLoad: Dialect = {
  name: 'standard-load',
  role: 'load',
  replyEnd: '\n',
  wake: (hands) =>
    new ScpiInterpreter({
      identity: hands.identity,
      reset: () => {
        hands.set(loadAtRest);
      },
      commands: loadCommands(hands),
    }),
};
