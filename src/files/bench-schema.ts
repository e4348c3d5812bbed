import * as z from '../libraries/zod.js';
import { type Bench, placeOf, postsOf, roleOf } from './bench.js';
import { choice, line, quantity } from './building-blocks.js';
import { camelKeys, withoutHeader } from './camel-keys.js';
import { headers } from './file-kind.js';
import { groupProblems, groupSchema } from './group-schema.js';
import { instrumentPlace as place, recordedAnswers } from './instrument-place.js';
import { simulationSchema } from './simulation-schema.js';

/** Longer than any input capacitor keeps a module latched. */
const longestOff = 600;

const source = camelKeys(
  place.extend({
    voltage: quantity('voltage', 'What the modules are fed with.', { above: 0 }),
    current: quantity('current', 'The most that the modules may take together.', { above: 0 }),
    'off-for': quantity('time', 'How long the source is off to clear a latch.', {
      above: 0,
      most: longestOff,
    }).prefault('5 s'),
  }),
);

/** A bench file, as an editor sees it and as the program reads it. */
export const benchSchema: z.ZodType<Bench> = z
  .strictObject({
    railproof: z.literal(headers.bench).describe('The kind of file and the version of its format.'),
    name: line('What the bench is called.', 64).min(1),
    instruments: z
      .strictObject({
        load: place.describe('The electronic load.'),
        meter: place.describe('The meter, its probes at the module.').exactOptional(),
        scanner: place
          .describe('A scanner that puts the meter across the places of a group.')
          .exactOptional(),
        thermometer: place
          .describe('A thermometer that touches the module, or the first of several.')
          .exactOptional(),
        source: source.describe('A dc source that feeds the inputs of dc modules.').exactOptional(),
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
        temperature: quantity('temperature', 'The highest temperature of a module.').exactOptional(),
      })
      .describe('Never exceeded, whatever a procedure asks.'),
    ambient: z
      .strictObject({
        temperature: quantity('temperature', 'What the surroundings have.'),
        uncertainty: quantity('temperature-difference', 'How far off that may be (half-width).', {
          least: 0,
        }).prefault('2 K'),
      })
      .exactOptional()
      .describe("The surroundings; a module's rise is above them."),
    group: groupSchema.exactOptional(),
    simulation: simulationSchema.exactOptional(),
    operator: recordedAnswers.exactOptional(),
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
    for (const { path, message } of groupProblems(bench)) complain([...path], message);
    for (const [post, instrument] of postsOf(bench)) {
      if (instrument.connection.kind === 'simulated' && bench.simulation === undefined) {
        const message =
          "a simulated instrument needs a 'simulation' section, which says what is really there";
        complain([...placeOf(post), 'connection'], message);
      }
    }
    if (bench.operator !== undefined) {
      const real = postsOf(bench).find(([, { connection }]) => connection.kind !== 'replay');
      const message = `recorded answers go with replayed instruments only, and the ${real?.[0] ?? ''} is none`;
      if (real !== undefined) complain(['operator'], message);
    }
    for (const role of Object.keys(bench.simulation?.instruments ?? {})) {
      if (postsOf(bench).some(([post]) => roleOf(post) === role)) continue;
      complain(
        ['simulation', 'instruments', role],
        `there is no ${role} among the instruments of this bench`,
      );
    }
  })
  .transform(({ leads = { resistance: 0, uncertainty: 0 }, ...bench }) => withoutHeader({ ...bench, leads }));
