import { loadAtRest, type LoadState } from '../virtual-load.js';
import type { Dialect, LoadHands } from './dialect.js';
import { loadCommands } from './load-commands.js';
import { type Outcome, type ScpiCommand } from './scpi-commands.js';
import { ScpiErrorNumber } from './scpi-errors.js';
import { headerPattern } from './scpi-header.js';
import { ScpiInterpreter } from './scpi-interpreter.js';

const CHANNELS = 8;

/**
 * Several standard loads in one case, of which INSTrument:NSELect selects one. The modules are wired to the
 * channel that is spoken to first; the others have nothing at their terminals.
 */
export const channelLoad: Dialect = {
  name: 'channel-load',
  role: 'load',
  replyEnd: '\n',
  wake: (hands) => {
    let selected = 1;
    let wired: number | undefined;
    const others = new Map<number, LoadHands>();
    const chosen = (): LoadHands => {
      wired ??= selected;
      if (selected === wired) return hands;
      const other = others.get(selected) ?? unwired(hands);
      others.set(selected, other);
      return other;
    };
    return new ScpiInterpreter({
      identity: hands.identity,
      reset: () => {
        hands.set(loadAtRest);
        others.clear();
        selected = 1;
      },
      commands: [
        selection(
          () => selected,
          (channel) => {
            selected = channel;
          },
        ),
        ...loadCommands({
          identity: hands.identity,
          most: hands.most,
          state: () => chosen().state(),
          set: (change) => {
            chosen().set(change);
          },
          measure: (what) => chosen().measure(what),
        }),
      ],
    });
  },
};

function unwired({ identity, most }: LoadHands): LoadHands {
  let state: LoadState = loadAtRest;
  return {
    identity,
    most,
    state: () => state,
    set: (change) => {
      state = { ...state, ...change };
    },
    measure: () => 0,
  };
}

function selection(get: () => number, set: (channel: number) => void): ScpiCommand {
  const error = (number: number): Outcome => ({ kind: 'error', number });
  return {
    header: headerPattern('INSTrument:NSELect'),
    tell: ([text, ...extra]) => {
      if (text === undefined) return error(ScpiErrorNumber.missingParameter);
      if (extra.length > 0) return error(ScpiErrorNumber.parameterNotAllowed);
      if (!/^\+?\d+$/.test(text)) return error(ScpiErrorNumber.dataType);
      if (Number(text) < 1 || Number(text) > CHANNELS) return error(ScpiErrorNumber.outOfRange);
      set(Number(text));
      return { kind: 'done' };
    },
    ask: ([extra]) =>
      extra === undefined ? { kind: 'reply', text: `+${get()}` } : error(ScpiErrorNumber.parameterNotAllowed),
  };
}
