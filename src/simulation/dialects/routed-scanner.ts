import type { Dialect } from './dialect.js';
import { channelList, channelListText } from './scpi-channel-list.js';
import { order, type Outcome, question, type ScpiCommand } from './scpi-commands.js';
import { ScpiErrorNumber } from './scpi-errors.js';
import { headerPattern } from './scpi-header.js';
import { ScpiInterpreter } from './scpi-interpreter.js';

/** A scanner of the ROUTe subsystem: CLOSe and OPEN take a list of channels. */
export const routedScanner: Dialect = {
  name: 'routed-scanner',
  role: 'scanner',
  replyEnd: '\n',
  wake: (hands) => {
    const openAll = (): void => {
      hands.open('all');
    };
    return new ScpiInterpreter({
      identity: hands.identity,
      reset: openAll,
      commands: [
        onChannels('ROUTe:CLOSe', {
          tell: (channels) => {
            hands.close(channels);
          },
          ask: (channel) => hands.closed().includes(channel),
        }),
        question('ROUTe:CLOSe:STATe', () => channelListText(hands.closed())),
        onChannels('ROUTe:OPEN', {
          tell: (channels) => {
            hands.open(channels);
          },
          ask: (channel) => !hands.closed().includes(channel),
        }),
        order('ROUTe:OPEN:ALL', openAll),
      ],
    });
  },
};

/** Told with a list of channels; asked with one, it answers 1 or 0 for each. */
function onChannels(
  header: string,
  act: {
    readonly tell: (channels: readonly number[]) => void;
    readonly ask: (channel: number) => boolean;
  },
): ScpiCommand {
  const listed =
    (perform: (channels: readonly number[]) => Outcome) =>
    (parameters: readonly string[]): Outcome => {
      if (parameters.length === 0) return { kind: 'error', number: ScpiErrorNumber.missingParameter };
      // The list has commas of its own.
      const read = channelList(parameters.join(','));
      return 'error' in read ? { kind: 'error', number: read.error } : perform(read.channels);
    };
  return {
    header: headerPattern(header),
    tell: listed((channels) => {
      act.tell(channels);
      return { kind: 'done' };
    }),
    ask: listed((channels) => ({
      kind: 'reply',
      text: channels.map((channel) => (act.ask(channel) ? '1' : '0')).join(','),
    })),
  };
}
