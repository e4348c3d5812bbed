import * as z from '../libraries/zod.js';
import { WrongPlaceError } from '../bench/wrong-place-error.js';
import { earthFound, type EarthLimits } from '../circuit/earth-found.js';
import type { OhmReadings } from '../circuit/ohm-readings.js';
import { count, quantity } from '../files/building-blocks.js';
import { camelKeys } from '../files/camel-keys.js';
import type { Module } from '../files/module.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Dimension, Seconds, Volts } from '../quantity/quantity.js';
import { askToDo, handTime } from './ask-to-do.js';
import { defineStep } from './define-step.js';
import { longestDwell } from './dwell.js';
import { requireIsolation } from './isolation-proved.js';
import * as ask from './isolation-prompts.js';
import { sayWhatIsLeft } from './left-behind.js';
import { MeterPoints } from './meter-points.js';
import { proveLeads } from './prove-leads.js';
import type { StepContext } from './step-kind.js';

const longestWait: Seconds = 3600;
/** What a supply takes to start. */
const startUp: Seconds = 2;

export const isolationCheck = defineStep({
  kind: 'isolation-check',
  summary:
    'module unplugged and discharged: proves the leads, measures output 0 V to earth, proves the leads again',
  parameters: camelKeys(
    z
      .strictObject({
        // Between what an ohmmeter reads of a good joint and of a joint that is none; protective bonding
        // itself must be below 0.1 Ω (IEC 60950-1, 2.6.3.4), which takes a bonding tester to show.
        'bonded-below': quantity('resistance', 'an output with less than this to earth is bonded to it', {
          above: 0,
        }).prefault('10 Ω'),
        // The least insulation resistance of circuits up to 500 V (IEC 60364-6; attribution from memory).
        'isolated-above': quantity(
          'resistance',
          'an output with more than this to earth is isolated from it',
          {
            above: 0,
          },
        ).prefault('1 MΩ'),
        'open-above': quantity(
          'resistance',
          'what the meter shows as open is at least this: the top of its widest range, from its manual',
          { above: 0 },
        ).prefault('10 MΩ'),
        'lead-resistance-below': quantity(
          'resistance',
          "the meter's leads, held together, read less than this",
          {
            above: 0,
          },
        ).prefault('2 Ω'),
        'discharged-below': quantity('voltage', 'an output with less than this is discharged', {
          above: 0,
          most: 5,
        }).prefault('1 V'),
        wait: quantity('time', 'how long the discharge may take', { least: 0, most: longestWait }).prefault(
          '60 s',
        ),
        dwell: quantity('time', 'settling before the first reading', {
          least: 0,
          most: longestDwell,
        }).prefault('1 s'),
        readings: count('how many readings at a point', { least: 2, most: 1000 }).default(5),
        'plug-in': z
          .boolean()
          .default(true)
          .describe('whether the modules are plugged in again at the end; a later step may need them'),
      })
      .superRefine((given, context) => {
        for (const [lower, higher] of rising) {
          if (given[lower] <= given[higher]) continue;
          const message = `it is more than ${higher}, and must not be`;
          context.addIssue({ code: 'custom', path: [lower], message });
        }
      }),
  ),
  measures: [],
  needs: {
    liveModule: false,
    operator: 'always',
    operations: { meter: ['measure-resistance', 'measure-voltage'] },
    readings: { meter: ['voltage', 'resistance'] },
  },
  references: () => ({}),
  currents: [],
  describe: ({ plugIn }) =>
    `unplugged and discharged, leads proved before and after: output to earth${plugIn ? '' : '; it stays unplugged'}`,
  // What is asked for once, and for each module; and likewise the points.
  duration: ({ dwell, readings }, { modules }) =>
    (5 + 4 * modules) * handTime + (2 + 5 * modules) * dwell + modules * readings,
  perform: checkIsolation,
});

/** What must not be more than what. */
const rising = [
  ['lead-resistance-below', 'bonded-below'],
  ['bonded-below', 'isolated-above'],
  ['isolated-above', 'open-above'],
] as const;

interface Parameters extends EarthLimits {
  readonly dischargedBelow: Volts;
  readonly wait: Seconds;
  readonly dwell: Seconds;
  readonly readings: number;
  readonly plugIn: boolean;
}

type Check = { readonly context: StepContext; readonly points: MeterPoints; readonly given: Parameters };

async function checkIsolation(given: Parameters, context: StepContext): Promise<void> {
  const { bench, earths, underTest, clock, signal } = context;
  const { modules, circuit } = underTest;
  if (bench.meter === undefined) throw new Error('an isolation check has a meter');
  const check = { context, given, points: new MeterPoints(context, bench.meter) };
  // What an earlier check found may have been changed since.
  for (const { name } of modules) earths.set(name, 'undetermined');
  await bench.load.inputOff();
  await bench.places.release();
  try {
    await check.points.measure('voltage');
    await askToDo(context, ask.unplug(modules));
    for (const module of modules) await discharge(check, module);
    let before = await proveLeads(context, check.points, given, 'before');
    for (const module of modules) {
      const earth = await readEarth(check, module);
      const after = await proveLeads(context, check.points, given, 'after');
      const promise = bench.meter.driver.accuracy['resistance'] ?? { ofReading: 0, fixed: 0 };
      const found = earthFound({ earth, before, after, promise }, given);
      earths.set(module.name, found.kind === 'proved' ? found.relation : 'undetermined');
      before = after;
    }
    // Wired as a stack, a module that is tied to earth shorts those below it as soon as it is plugged in,
    // whether that is here or in a later step.
    if (circuit === 'series') requireIsolation(context);
    await check.points.measure('voltage');
    await askToDo(context, ask.probesBack);
    bench.places.movedTo(undefined);
    if (!given.plugIn) return;
    await askToDo(context, ask.plugIn(modules));
    await clock.sleep(startUp, signal);
  } catch (error) {
    await leaveUnplugged(context);
    throw error;
  }
}

/** @throws WrongPlaceError `still-charged` */
async function discharge({ context, points, given }: Check, module: Module): Promise<void> {
  const { bench, underTest } = context;
  // Where there is one module its output is where the meter is anyway, unless a scanner is between.
  const away = underTest.modules.length > 1 || bench.instruments.some(({ post }) => post === 'scanner');
  if (away) {
    await askToDo(context, ask.probeOutput(module));
    bench.places.movedTo(`output-of-${module.name}`);
  }
  const plan = { phase: 'discharge', of: module.name, dwell: given.dwell } as const;
  const volts = await points.voltageFalls(plan, given.dischargedBelow, given.wait);
  if (Math.abs(volts) < given.dischargedBelow) return;
  throw new WrongPlaceError(
    'still-charged',
    `${shown(given.wait, 'time')} after it was unplugged the output of ${module.name} still reads ${shown(volts, 'voltage')}`,
    'is it the right plug that was pulled? Let it discharge through a resistor or a lamp, never through a short',
  );
}

/** The ohmmeter's own voltage would be lost in another, and the meter might be hurt: so first there must be none. */
async function readEarth({ context, points, given }: Check, module: Module): Promise<OhmReadings> {
  const { bench, underTest } = context;
  const plan = { of: module.name, dwell: given.dwell, readings: given.readings };
  await points.measure('voltage');
  await askToDo(context, ask.probeEarth(module, underTest.modules.length === 1));
  bench.places.movedTo(`earth-of-${module.name}`);
  const volts = await points.voltage({ phase: 'discharge', ...plan });
  const most = Math.max(Math.abs(volts.minimum), Math.abs(volts.maximum));
  if (most >= given.dischargedBelow) {
    throw new WrongPlaceError(
      'still-charged',
      `between earth and the 0 V of ${module.name} there are ${shown(most, 'voltage')}`,
      'something is plugged in, wired to it or charged: take the leads off, and find out what before anything is touched',
    );
  }
  await points.measure('resistance');
  const earth = await points.resistance({ phase: 'earth', ...plan });
  context.show({ note: `${module.name}: ${inWords(earth)} to earth` });
  return earth;
}

/** Whatever went wrong: the meter measures voltages again, as whatever comes after takes for granted. */
async function leaveUnplugged(context: StepContext): Promise<void> {
  const { bench, underTest } = context;
  await bench.regardless(async () => bench.meter?.perform('measure-voltage')).catch(() => undefined);
  const modules = ask.named(underTest.modules);
  sayWhatIsLeft(
    context,
    `the check of the isolation ended early: ${modules} may still be unplugged, and the meter's leads off their place`,
  );
}

function inWords({ values, open }: OhmReadings): string {
  return open > 0 ? 'open' : shown(values.mean, 'resistance');
}

function shown(value: number, dimension: Dimension): string {
  return formatQuantity(value, dimension, { significant: 3 });
}
