import { loadAtRest } from '../virtual-load.js';
import type { Dialect } from './dialect.js';
import { loadCommands } from './load-commands.js';
import { order } from './scpi-commands.js';
import { ScpiInterpreter } from './scpi-interpreter.js';

/** What is heard while the front panel has it. */
const heardInLocal = /^\s*(?:\*IDN\?|:?SYST(?:EM)?:REM(?:OTE)?)\s*$/i;

/** A standard load that must be put in remote first: until then it says who it is, and does nothing it is told. */
export const remoteLoad: Dialect = {
  name: 'remote-load',
  role: 'load',
  replyEnd: '\n',
  wake: (hands) => {
    let remote = false;
    const interpreter = new ScpiInterpreter({
      identity: hands.identity,
      reset: () => {
        hands.set(loadAtRest);
      },
      commands: [
        order('SYSTem:REMote', () => {
          remote = true;
        }),
        order('SYSTem:LOCal', () => {
          remote = false;
        }),
        ...loadCommands(hands),
      ],
    });
    return {
      hear: (message) =>
        remote || heardInLocal.test(message)
          ? interpreter.hear(message)
          : { reply: undefined, understood: false },
      overrun: () => {
        interpreter.overrun();
      },
    };
  },
};
