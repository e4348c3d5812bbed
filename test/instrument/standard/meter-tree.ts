import { type Answer, type Command, event, type Occasion, query, setting, withOptional } from './command.js';
import { StandardError } from './errors.js';
import { boolean, functionName, numeric, oneOf } from './parameters.js';

export type MeterFunction = 'VOLTage[:DC]' | 'VOLTage:AC' | 'RESistance' | 'FRESistance';

export interface MeterBody {
  function: MeterFunction;
  continuous: boolean;
  readonly measured: Record<MeterFunction, number>;
  /** How long one measurement takes. */
  readonly aperture: number;
}

export const meterBody = (): MeterBody => ({
  function: 'VOLTage[:DC]',
  continuous: false,
  measured: { 'VOLTage[:DC]': 0, 'VOLTage:AC': 0, RESistance: 0, FRESistance: 0 },
  aperture: 0.1,
});

const functions = ['VOLTage[:DC]', 'VOLTage:AC', 'RESistance', 'FRESistance'] as const;
/** Expected value, and resolution: each may be left out, from behind (SCPI-99, volume 2, 3). */
const expectations = (printed: MeterFunction) => {
  const bounds = { least: 0, most: 1e9 };
  const unit = printed.startsWith('VOLT') ? 'V' : 'OHM';
  return [numeric(unit, bounds), numeric(unit, bounds)];
};

/** A meter of SCPI-99: CONFigure, INITiate, FETCh?, READ?, MEASure?, and SENSe:FUNCtion beneath them. */
export function meterTree(body: MeterBody): readonly Command[] {
  let doneAt: number | undefined;
  const start = ({ at }: Occasion): number => {
    doneAt = at + body.aperture;
    return body.aperture;
  };
  const fetch = ({ at }: Occasion): Answer => {
    if (doneAt === undefined) throw new StandardError(-230);
    return {
      response: { kind: 'number', value: body.measured[body.function] },
      takes: Math.max(0, doneAt - at),
    };
  };
  const configure = (printed: MeterFunction): void => {
    body.function = printed;
    doneAt = undefined;
  };
  const read = (occasion: Occasion): Answer => {
    start(occasion);
    return fetch(occasion);
  };
  return [
    ...functions.flatMap((printed) => [
      withOptional(
        event(`CONFigure[:SCALar]:${printed}`, () => {
          configure(printed);
          return undefined;
        }),
        expectations(printed),
      ),
      withOptional(
        query(`MEASure[:SCALar]:${printed}`, (occasion) => {
          configure(printed);
          return read(occasion);
        }),
        expectations(printed),
      ),
    ]),
    query('CONFigure', () => ({ kind: 'function', printed: body.function, with: [10, 0.00001] })),
    setting(
      '[SENSe:]FUNCtion[:ON]',
      functionName(...functions),
      { get: () => body.function, set: configure },
      (printed) => ({ kind: 'function', printed }),
    ),
    event('INITiate[:IMMediate]', (occasion) => {
      if (body.continuous) throw new StandardError(-213);
      return { goesOn: start(occasion) };
    }),
    setting(
      'INITiate:CONTinuous',
      boolean,
      {
        get: () => body.continuous,
        set: (on) => {
          body.continuous = on;
        },
      },
      (value) => ({ kind: 'boolean', value }),
    ),
    query('FETCh', fetch),
    query('READ', read),
  ];
}

/** A thermometer: MEASure:TEMPerature?, with the transducer and its type where they are given. */
export function thermometerTree(celsius: () => number): readonly Command[] {
  return [
    withOptional(
      query('MEASure[:SCALar]:TEMPerature', () => ({ kind: 'number', value: celsius() })),
      [oneOf('TCouple', 'RTD', 'THERmistor'), oneOf('J', 'K', 'T')],
    ),
    setting(
      'UNIT:TEMPerature',
      oneOf('C', 'CEL'),
      { get: () => 'C' as const, set: () => undefined },
      (printed) => ({ kind: 'word', printed }),
    ),
  ];
}
