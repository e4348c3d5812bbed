import { type Command, event, order, query } from './command.js';
import { StandardError } from './errors.js';
import { channelList } from './parameters.js';

/** A card of relays in the words of ROUTe (SCPI-99, volume 2, ROUTe). */
export function scannerTree(there: readonly number[], closed: Set<number>): readonly Command[] {
  const list = channelList(there);
  const asked = (printed: string, isSo: (channel: number) => boolean): Command => ({
    header: query(printed, () => ({ kind: 'channels', channels: [] })).header,
    ask: ([first, ...others]) => {
      if (first === undefined) throw new StandardError(-109);
      if (others.length > 0) throw new StandardError(-108);
      const of = list(first).map((channel) => ({ kind: 'boolean', value: isSo(channel) }) as const);
      return { response: { kind: 'list', of } };
    },
  });
  return [
    order('ROUTe:CLOSe', list, (channels) => {
      for (const channel of channels) closed.add(channel);
    }),
    order('ROUTe:OPEN', list, (channels) => {
      for (const channel of channels) closed.delete(channel);
    }),
    asked('ROUTe:CLOSe', (channel) => closed.has(channel)),
    asked('ROUTe:OPEN', (channel) => !closed.has(channel)),
    event('ROUTe:OPEN:ALL', () => {
      closed.clear();
      return undefined;
    }),
    query('ROUTe:CLOSe:STATe', () => ({
      kind: 'channels',
      channels: [...closed].sort((one, other) => one - other),
    })),
  ];
}
