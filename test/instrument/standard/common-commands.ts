import { type Command, event, type Occasion, query, setting } from './command.js';
import { type ErrorQueue, errorTexts } from './errors.js';
import { whole } from './parameters.js';
import type { Response } from './response.js';
import type { EventRegister, Status } from './status.js';

export interface Interior {
  readonly identity: string;
  readonly status: Status;
  readonly errors: ErrorQueue;
  /** Whether a response of the message at hand waits already. */
  hasOutput(): boolean;
  /** *OPC: says so once all that it is doing is done. */
  completeLater(): void;
  /** When that is. */
  busyUntil(): number;
}

const eightBits = { least: 0, most: 255 };
const fifteenBits = { least: 0, most: 32767 };
const number = (value: number): Response => ({ kind: 'whole', value });

/** What every instrument must have: IEEE 488.2, 10, and SCPI-99, volume 1, 4.2.1. */
export function commonCommands(interior: Interior): readonly Command[] {
  const { identity, status, errors } = interior;
  const left = ({ at }: Occasion): number => Math.max(0, interior.busyUntil() - at);
  return [
    query('*IDN', () => ({ kind: 'arbitrary', text: identity })),
    query('*TST', () => number(0)),
    event('*CLS', () => {
      status.clear();
      errors.clear();
      return undefined;
    }),
    mask('*ESE', status.standard, eightBits),
    query('*ESR', () => number(status.standard.read())),
    setting(
      '*SRE',
      whole(eightBits),
      {
        get: () => status.serviceEnabled,
        set: (bits) => {
          status.serviceEnabled = bits;
        },
      },
      number,
    ),
    query('*STB', () => number(status.byte({ errors: !errors.isEmpty, output: interior.hasOutput() }))),
    event('*OPC', () => {
      interior.completeLater();
      return undefined;
    }),
    // It answers when all is done, and not before; *WAI is the same without an answer.
    query('*OPC', (occasion) => ({ response: number(1), takes: left(occasion) })),
    event('*WAI', (occasion) => ({ waits: left(occasion) })),
    query('SYSTem:ERRor[:NEXT]', () => {
      const next = errors.next();
      return { kind: 'list', of: [number(next), { kind: 'string', text: errorTexts[`${next}`] }] };
    }),
    query('SYSTem:ERRor:COUNt', () => number(errors.count)),
    query('SYSTem:VERSion', () => ({ kind: 'verbatim', text: '1999.0' })),
    ...statusRegister('OPERation', status.operation),
    ...statusRegister('QUEStionable', status.questionable),
    event('STATus:PRESet', () => {
      status.preset();
      return undefined;
    }),
  ];
}

function statusRegister(name: string, register: EventRegister): readonly Command[] {
  return [
    query(`STATus:${name}[:EVENt]`, () => number(register.read())),
    // Nothing here is ever under way or in question.
    query(`STATus:${name}:CONDition`, () => number(0)),
    mask(`STATus:${name}:ENABle`, register, fifteenBits),
  ];
}

function mask(printed: string, register: EventRegister, bounds: typeof eightBits): Command {
  return setting(
    printed,
    whole(bounds),
    {
      get: () => register.enabled,
      set: (bits) => {
        register.enabled = bits;
      },
    },
    number,
  );
}
