import { type Command, event, query, setting, withOptional } from './command.js';
import { StandardError } from './errors.js';
import { boolean, numeric, oneOf, whole } from './parameters.js';
import type { Response } from './response.js';
import type { UnitSymbol } from './suffix.js';

export type LoadMode = 'CURRent' | 'VOLTage' | 'RESistance' | 'POWer';

/** One load, or one channel of a load. */
export interface LoadBody {
  input: boolean;
  mode: LoadMode;
  readonly levels: Record<'CURRent' | 'VOLTage', number>;
  readonly protections: Record<'CURRent' | 'VOLTage' | 'POWer', number>;
  /** What there is to be measured. */
  readonly measured: Record<'CURRent' | 'VOLTage' | 'POWer', number>;
}

export const loadBody = (): LoadBody => ({
  input: false,
  mode: 'VOLTage',
  levels: { CURRent: 0, VOLTage: 0 },
  protections: { CURRent: 40, VOLTage: 160, POWer: 200 },
  measured: { CURRent: 0, VOLTage: 0, POWer: 0 },
});

const most = { CURRent: 60, VOLTage: 160, POWer: 1000 };
const units: Readonly<Record<keyof typeof most, UnitSymbol>> = { CURRent: 'A', VOLTage: 'V', POWer: 'W' };
const number = (value: number): Response => ({ kind: 'number', value });

/**
 * A load in the words of SCPI-99: INPut:STATe, SOURce:CURRent and its kin, MEASure. The standard has no chapter on
 * loads. Its SOURce:FUNCtion:MODE says what is held; that MODE may be left out is what loads have made of it.
 */
export function loadTree(body: () => LoadBody): readonly Command[] {
  return [
    setting(
      'INPut[:STATe]',
      boolean,
      {
        get: () => body().input,
        set: (on) => {
          body().input = on;
        },
      },
      (value) => ({ kind: 'boolean', value }),
    ),
    setting(
      '[SOURce:]FUNCtion[:MODE]',
      oneOf<LoadMode>('CURRent', 'VOLTage', 'RESistance', 'POWer'),
      {
        get: () => body().mode,
        set: (mode) => {
          body().mode = mode;
        },
      },
      (printed) => ({ kind: 'word', printed }),
    ),
    ...(['CURRent', 'VOLTage'] as const).map((what) =>
      level(`[SOURce:]${what}[:LEVel][:IMMediate][:AMPLitude]`, what, () => body().levels),
    ),
    ...(['CURRent', 'VOLTage', 'POWer'] as const).flatMap((what) => [
      level(`[SOURce:]${what}:PROTection[:LEVel]`, what, () => body().protections),
      withOptional(
        query(`MEASure[:SCALar]:${what}[:DC]`, () => number(body().measured[what])),
        [numeric(units[what], { least: 0, most: most[what] }), numeric(units[what], { least: 0, most: 1 })],
      ),
    ]),
  ];
}

/** Several loads in one, of which INSTrument selects one (SCPI-99, volume 2, INSTrument). */
export function channelsTree(bodies: readonly LoadBody[]): readonly Command[] {
  let selected = 1;
  const body = (): LoadBody => {
    const found = bodies[selected - 1];
    if (found === undefined) throw new StandardError(-221);
    return found;
  };
  return [
    setting(
      'INSTrument:NSELect',
      whole({ least: 1, most: bodies.length }),
      {
        get: () => selected,
        set: (channel) => {
          selected = channel;
        },
      },
      (value) => ({ kind: 'whole', value }),
    ),
    ...loadTree(body),
  ];
}

/**
 * The same only once it is in remote, as some are over a serial line. SYSTem:REMote and LOCal are no words of
 * SCPI-99, which leaves this to the bus; they are headers as IEEE 488.2 has them.
 */
export function remoteFirst(commands: readonly Command[]): readonly Command[] {
  let remote = false;
  const only = (): void => {
    if (!remote) throw new StandardError(-221);
  };
  const told = (header: string, to: boolean): Command =>
    event(header, () => {
      remote = to;
      return undefined;
    });
  return [
    told('SYSTem:REMote', true),
    told('SYSTem:LOCal', false),
    ...commands.map(({ header, tell, ask }): Command => ({
      header,
      ...(tell && {
        tell: (data, occasion) => {
          only();
          return tell(data, occasion);
        },
      }),
      ...(ask && {
        ask: (data, occasion) => {
          only();
          return ask(data, occasion);
        },
      }),
    })),
  ];
}

/**
 * An older load: the grammar of IEEE 488.2 with words of its own, and replies that end in their unit, which no
 * standard knows.
 */
export function shortTree(body: LoadBody): readonly Command[] {
  const short = (printed: string, what: 'CURRent' | 'VOLTage'): Command => ({
    ...level(printed, what, () => body.levels),
    ...query(printed, () => ({ kind: 'number', value: body.measured[what], unit: units[what] })),
  });
  return [
    setting(
      'INP',
      boolean,
      {
        get: () => body.input,
        set: (on) => {
          body.input = on;
        },
      },
      (value) => ({ kind: 'boolean', value }),
    ),
    setting(
      'MODE',
      oneOf('CC', 'CV'),
      {
        get: () => (body.mode === 'CURRent' ? 'CC' : 'CV'),
        set: (mode) => {
          body.mode = mode === 'CC' ? 'CURRent' : 'VOLTage';
        },
      },
      (printed) => ({ kind: 'word', printed }),
    ),
    short('CUR', 'CURRent'),
    short('VOL', 'VOLTage'),
  ];
}

function level<What extends keyof typeof most>(
  printed: string,
  what: What,
  kept: () => Record<What, number>,
): Command {
  return setting(
    printed,
    numeric(units[what], { least: 0, most: most[what] }),
    {
      get: () => kept()[what],
      set: (value) => {
        kept()[what] = value;
      },
    },
    number,
  );
}
