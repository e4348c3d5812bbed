import * as z from '../libraries/zod.js';
import { choice, count, line, name, quantity, quantityOrWord } from './building-blocks.js';
import { camelKeys } from './camel-keys.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Dimension } from '../quantity/quantity.js';
import { readingDimensions, errorDimension } from './reading-dimensions.js';
import type { ModuleLimit, Simulation } from './simulation-section.js';

const limitCurrent = quantity('current', 'Where the limit sets in, with the module cold.', { above: 0 });

/** What is left of the limit at a short circuit, where a folding-back module does not say. */
const usualFoldback = 0.3;

const limit = z.discriminatedUnion('style', [
  z.strictObject({
    style: z.literal('constant-current').describe('It holds the current and lets the voltage fall.'),
    current: limitCurrent,
  }),
  z
    .strictObject({
      style: z.literal('foldback').describe('The current falls with the voltage.'),
      current: limitCurrent,
      'short-circuit': quantity(
        'current',
        'What still flows into a short; 30 % of the limit when left out.',
        {
          least: 0,
        },
      ).exactOptional(),
    })
    .superRefine((value, context) => {
      if (value['short-circuit'] === undefined || value['short-circuit'] < value.current) return;
      const message = 'a module that folds back gives less into a short than at its limit';
      context.addIssue({ code: 'custom', path: ['short-circuit'], message });
    })
    .transform((value): ModuleLimit => ({
      style: value.style,
      current: value.current,
      shortCircuit: value['short-circuit'] ?? usualFoldback * value.current,
    })),
  z.strictObject({
    style: z.literal('constant-power').describe('The current rises as the voltage falls.'),
    current: limitCurrent,
  }),
  z.strictObject({
    style: z.literal('hiccup').describe('It switches off and tries again and again.'),
    current: limitCurrent,
    period: quantity('time', 'It tries to start once in each period.', { above: 0 }).prefault('800 ms'),
  }),
  z.strictObject({
    style: z.literal('latch-off').describe('It stays off until its input is cycled.'),
    current: limitCurrent,
  }),
]);

const simulatedModule = camelKeys(
  z.strictObject({
    name: name('The module this is, as its module file names it.', ['K1']),
    'open-circuit-voltage': quantity('voltage', 'The true open-circuit voltage.', { above: 0 }),
    'droop-resistance': quantity('resistance', 'The true slope in regulation.', { least: 0 }),
    limit: limit.describe('How the module behaves at its limit.'),
    'unsteady-above': quantity('current', 'It oscillates from here to the limit.', {
      least: 0,
    }).exactOptional(),
    noise: quantity('voltage', 'Standard deviation of the noise that a meter sees.', { least: 0 }).prefault(
      '0 V',
    ),
    ballast: quantity('resistance', 'In series with the module, in a group or a stack.', {
      least: 0,
    }).prefault('0 mΩ'),
    'reverse-diode': z.boolean().default(false).describe('Whether one is across its output; in series only.'),
    earth: quantityOrWord('resistance', ['bonded', 'isolated'], 'How output 0 V is tied to earth.', {
      least: 0,
    }).prefault('isolated'),
    'rated-current': quantity('current', 'The current at which the rise is `rise-at-rated`.', {
      above: 0,
    }).exactOptional(),
    thermal: camelKeys(
      z.strictObject({
        'rise-at-rated': quantity('temperature-difference', 'Settled rise at the rated current.', {
          least: 0,
        }),
        'time-constant': quantity('time', 'How fast it warms.', { above: 0 }),
        ambient: quantity('temperature', 'The air around it.').prefault('23 °C'),
        'limit-per-kelvin': quantity('ratio', 'Change of the limit for each kelvin of rise.').prefault('0 %'),
      }),
    )
      .exactOptional()
      .describe('How it warms, and what that does to its limit.'),
  }),
);

const errors = Object.fromEntries([
  ...Object.entries(readingDimensions).map(([reading, dimension]) => [
    reading,
    errorsIn(errorDimension(dimension)).describe(`The errors of its readings of ${reading}.`),
  ]),
  ...(['current', 'voltage'] as const).map((quantity) => [
    `set-${quantity}`,
    errorsIn(quantity).describe(`How far the ${quantity} that it sets is from the one it was told.`),
  ]),
]) as Record<string, ReturnType<typeof errorsIn>>;

function errorsIn(unit: Dimension) {
  const nothing = formatQuantity(0, unit);
  return z
    .strictObject({
      gain: quantity('ratio', 'Relative error.').prefault('0 %'),
      offset: quantity(unit, 'Error at zero.').prefault(nothing),
      resolution: quantity(unit, 'The step of the last digit.', { least: 0 }).prefault(nothing),
    })
    .exactOptional();
}

const simulatedInstrument = camelKeys(
  z.strictObject({
    errors: z.strictObject(errors).prefault({}).describe('The errors this one really has, by reading.'),
    'reading-time': quantity('time', 'How long it takes over one reading.', { least: 0 }).exactOptional(),
  }),
);

const faultNames = [
  'load-silent',
  'meter-silent',
  'load-restarted',
  'meter-restarted',
  'load-stuck',
  'meter-stuck',
  'load-lost',
  'meter-lost',
  'scanner-silent',
  'scanner-lost',
  'scanner-restarted',
  'scanner-stuck',
  'scanner-stuck-unnoticed',
  'thermometer-silent',
  'thermometer-lost',
  'thermometer-restarted',
  'source-silent',
  'source-lost',
  'source-restarted',
  'module-dead',
  'reversed',
  'meter-wrong-mode',
  'probes-reversed',
  'lead-broken',
] as const;

/** The `simulation` section of a bench file. */
export const simulationSchema: z.ZodType<Simulation> = z
  .strictObject({
    seed: count('Fixes all that is drawn at random.', { least: 0, most: 2 ** 32 - 1 }).default(1),
    circuit: choice(['single', 'parallel', 'series'], 'How the modules are wired.').default('single'),
    leads: quantity('resistance', 'Module (or group) to load terminals, there and back.', {
      least: 0,
    }).prefault('0 mΩ'),
    modules: z.array(simulatedModule).min(1).max(64).describe('The modules, in the order of the circuit.'),
    instruments: z
      .strictObject({
        load: simulatedInstrument.exactOptional().describe('The load.'),
        meter: simulatedInstrument.exactOptional().describe('The meter.'),
        scanner: simulatedInstrument.exactOptional().describe('The scanner.'),
        thermometer: simulatedInstrument.exactOptional().describe('The thermometer.'),
        source: simulatedInstrument.exactOptional().describe('The source.'),
      })
      .default({})
      .describe('Errors of the instruments; those left out are drawn within the accuracy of the driver.'),
    answers: z
      .record(z.string(), line('What the operator answers.'))
      .default({})
      .describe('What the simulated operator answers, by the name of the operator step.'),
    faults: z
      .array(
        z.strictObject({
          at: quantity('time', 'When, from the start.', { least: 0 }),
          what: choice(faultNames, 'What happens.'),
          for: quantity('time', 'How long, where it passes; of what is silent, lost or restarted.', {
            above: 0,
          }).exactOptional(),
          of: name('The module it happens to.', ['K2']).exactOptional(),
        }),
      )
      .max(100)
      .default([])
      .describe('What goes wrong, and when.'),
  })
  .superRefine((simulation, context) => {
    const { circuit, modules } = simulation;
    const complain = (path: PropertyKey[], message: string): void => {
      context.addIssue({ code: 'custom', path, message });
    };
    if (circuit === 'single' && modules.length !== 1) {
      complain(['modules'], `a single circuit has exactly one module; found ${modules.length}`);
    }
    if (circuit !== 'single' && modules.length < 2) {
      complain(['modules'], `a ${circuit} circuit has at least two modules; found ${modules.length}`);
    }
    for (const [index, fault] of simulation.faults.entries()) {
      const passes = /-(silent|lost|restarted)$/.test(fault.what);
      if (fault.for !== undefined && !passes) {
        complain(['faults', index, 'for'], `${fault.what} does not pass: leave out 'for'`);
      }
      if (fault.for === undefined && fault.what.endsWith('-restarted')) {
        complain(['faults', index], `${fault.what} needs a 'for': how long it is away`);
      }
    }
    for (const [index, module] of modules.entries()) {
      if (modules.findIndex((other) => other.name === module.name) < index) {
        complain(['modules', index, 'name'], `a second module is called '${module.name}'`);
      }
    }
  })
  .describe('What is really there, on a bench with simulated instruments.');
