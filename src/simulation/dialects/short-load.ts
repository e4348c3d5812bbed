import type { Dialect, Heard, LoadHands } from './dialect.js';

/**
 * A load of the older short style: three letters, replies that carry their unit, no error queue, and no word
 * about a message it does not know or a value it cannot take.
 */
export const shortLoad: Dialect = {
  name: 'short-load',
  role: 'load',
  replyEnd: '\r\n',
  wake: (hands) => ({
    hear: (message) => {
      for (const { form, perform } of phrases) {
        const found = form.exec(message.trim());
        if (found !== null) return perform(hands, found[1] ?? '');
      }
      return { reply: undefined, understood: false };
    },
    overrun: () => undefined,
  }),
};

interface Phrase {
  readonly form: RegExp;
  readonly perform: (hands: LoadHands, value: string) => Heard;
}

/** Older instruments show three decimals. */
const DECIMALS = 3;
const silently: Heard = { reply: undefined, understood: true };
const answer = (reply: string): Heard => ({ reply, understood: true });

const phrases: readonly Phrase[] = [
  { form: /^\*IDN\?$/i, perform: ({ identity }) => answer(identity) },
  { form: /^INP\?$/i, perform: (hands) => answer(hands.state().input === 'on' ? '1' : '0') },
  { form: /^INP ([01])$/i, perform: (hands, value) => set(hands, { input: value === '1' ? 'on' : 'off' }) },
  {
    form: /^MODE (CC|CV)$/i,
    perform: (hands, value) => set(hands, { mode: value.toUpperCase() === 'CC' ? 'current' : 'voltage' }),
  },
  { form: /^CUR\?$/i, perform: (hands) => answer(`${hands.measure('current').toFixed(DECIMALS)}A`) },
  { form: /^VOL\?$/i, perform: (hands) => answer(`${hands.measure('voltage').toFixed(DECIMALS)}V`) },
  {
    form: /^CUR (\d+(?:\.\d*)?|\.\d+)$/i,
    perform: (hands, value) =>
      within(Number(value), hands.most.current, () => set(hands, { setCurrent: Number(value) })),
  },
  {
    form: /^VOL (\d+(?:\.\d*)?|\.\d+)$/i,
    perform: (hands, value) =>
      within(Number(value), hands.most.voltage, () => set(hands, { setVoltage: Number(value) })),
  },
];

function set(hands: LoadHands, change: Parameters<LoadHands['set']>[0]): Heard {
  hands.set(change);
  return silently;
}

function within(value: number, most: number, perform: () => Heard): Heard {
  return value <= most ? perform() : { reply: undefined, understood: false };
}
