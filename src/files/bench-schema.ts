import { z } from 'zod';
import type { Bench } from './bench.js';
import { choice, line, quantity, readFromText } from './building-blocks.js';
import { withoutHeader } from './camel-keys.js';
import { addressForms, AddressError, parseAddress } from './connection-address.js';
import { headers } from './file-kind.js';
import { found } from './plain-words.js';
import { simulationSchema } from './simulation-schema.js';

const connection = readFromText(
  {
    description: 'The way to the instrument.',
    pattern: '^(?:tcp://.+:[0-9]+|serial:.+|replay:.+|simulated:.*)$',
    examples: [...addressForms],
  },
  `an address is needed: ${addressForms[0]}`,
  (value) => {
    if (typeof value === 'string') return parseAddress(value);
    throw new AddressError(`${found(value)}; an address is needed: ${addressForms[0]}`, String(value));
  },
);

const place = z.strictObject({
  driver: line('The name of a shipped driver, or the path of a driver file from here.').min(1),
  connection,
});

/** A bench file, as an editor sees it and as the program reads it. */
export const benchSchema: z.ZodType<Bench> = z
  .strictObject({
    railproof: z.literal(headers.bench).describe('The kind of file and the version of its format.'),
    name: line('What the bench is called.', 64).min(1),
    instruments: z
      .strictObject({
        load: place.describe('The electronic load.'),
        meter: place.describe('The meter, its probes at the module.').exactOptional(),
      })
      .describe('The instruments, by their part in the work.'),
    leads: z
      .strictObject({
        resistance: quantity('resistance', 'There and back.', { least: 0 }),
        uncertainty: quantity('resistance', 'How far off that may be (half-width).', { least: 0 }),
      })
      .exactOptional()
      .describe('The leads from module to load; used when nothing senses at the module.'),
    'voltage-from': choice(['meter-at-module', 'load-terminals'], 'Where the voltage of the module is read.'),
    limits: z
      .strictObject({
        voltage: quantity('voltage', 'The highest voltage.', { above: 0 }),
        current: quantity('current', 'The highest current.', { above: 0 }),
        power: quantity('power', 'The highest power.', { above: 0 }),
      })
      .describe('Never exceeded, whatever a procedure asks.'),
    simulation: simulationSchema.exactOptional(),
  })
  .meta({
    title: 'railproof bench',
    description: 'The instruments, leads and hard limits of one work place.',
  })
  .superRefine((bench, context) => {
    // What would not fit together may only be misspelt, and that has been told already.
    if (context.issues.length > 0) return;
    const complain = (path: PropertyKey[], message: string): void => {
      context.addIssue({ code: 'custom', path, message });
    };
    if (bench['voltage-from'] === 'meter-at-module' && bench.instruments.meter === undefined) {
      complain(['voltage-from'], 'meter-at-module needs a meter among the instruments');
    }
    if (bench['voltage-from'] === 'load-terminals' && bench.leads === undefined) {
      complain(['leads'], 'missing; the leads must be known when the voltage is read at the load terminals');
    }
    for (const [role, instrument] of Object.entries(bench.instruments)) {
      if (instrument.connection.kind === 'simulated' && bench.simulation === undefined) {
        const message =
          "a simulated instrument needs a 'simulation' section, which says what is really there";
        complain(['instruments', role, 'connection'], message);
      }
    }
    for (const role of Object.keys(bench.simulation?.instruments ?? {})) {
      if (Object.hasOwn(bench.instruments, role)) continue;
      complain(
        ['simulation', 'instruments', role],
        `there is no ${role} among the instruments of this bench`,
      );
    }
  })
  .transform(({ leads = { resistance: 0, uncertainty: 0 }, ...bench }) => withoutHeader({ ...bench, leads }));
