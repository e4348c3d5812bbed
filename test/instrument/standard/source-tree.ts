import { type Command, query, setting } from './command.js';
import { boolean, numeric } from './parameters.js';
import type { Response } from './response.js';

export interface SourceBody {
  output: boolean;
  readonly levels: Record<'CURRent' | 'VOLTage', number>;
  readonly measured: Record<'CURRent' | 'VOLTage', number>;
}

export const sourceBody = (): SourceBody => ({
  output: false,
  levels: { CURRent: 0, VOLTage: 0 },
  measured: { CURRent: 0, VOLTage: 0 },
});

const number = (value: number): Response => ({ kind: 'number', value });

/** A dc power supply as SCPI-99 has it (volume 4, Power Supplies): OUTPut, SOURce:VOLTage and CURRent, MEASure. */
export function sourceTree(body: SourceBody): readonly Command[] {
  return [
    setting(
      'OUTPut<1>[:STATe]',
      boolean,
      {
        get: () => body.output,
        set: (on) => {
          body.output = on;
        },
      },
      (value) => ({ kind: 'boolean', value }),
    ),
    ...(['CURRent', 'VOLTage'] as const).flatMap((what) => [
      setting(
        `[SOURce<1>:]${what}[:LEVel][:IMMediate][:AMPLitude]`,
        numeric(what === 'CURRent' ? 'A' : 'V', { least: 0, most: 60 }),
        {
          get: () => body.levels[what],
          set: (value) => {
            body.levels[what] = value;
          },
        },
        number,
      ),
      query(`MEASure[:SCALar]:${what}[:DC]`, () => number(body.measured[what])),
    ]),
  ];
}
