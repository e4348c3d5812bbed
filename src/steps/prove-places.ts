import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Ratio, Seconds, Volts } from '../quantity/quantity.js';
import { askToDo } from './ask-to-do.js';
import { sayWhatIsLeft } from './left-behind.js';
import type { Pass } from './place-passes.js';
import { elsewhere, reversed, swapped } from './place-errors.js';
import { type ProofLook, tellPlaces } from './places-told.js';
import type { Points } from './point.js';
import { startUp } from './start-up.js';
import type { StepContext } from './step-kind.js';
import { tapsOf, type UnderTest } from './under-test.js';

/** What a proof is made with. */
export interface Proving {
  /** In a group, what the modules carry while one of them is unplugged. */
  readonly current: Amperes;
  readonly dwell: Seconds;
  readonly readings: number;
}

/** A place is dead when it reads less than this part of what the largest reads, or in a stack the smallest label says. */
const nothing: Ratio = 0.2;
/** What is read must be this many times what the meter promises at zero before a place can be told dead from alive. */
const tellable = 4;
/** How far from its label a module's voltage may be before it is something else that is read. */
const offLabel: Ratio = 0.25;

/**
 * Shows that what is read at a place comes from the module that is said to stand there, by unplugging one
 * after the other: its place must go dead. In a group a small current shows it, in a stack the open voltages
 * do. Nothing is concluded before all looks are there, as one alone does not tell swapped modules from
 * probes at another place. In this way both, swapped probes and a scanner whose channel is stuck are found
 * before anything is made of the readings.
 *
 * Where the operator has the one meter at one place, only its own module is unplugged; the others whose turn
 * is still to come follow only if the place did not go dead.
 * @throws WrongPlaceError naming what was found and where.
 */
export async function provePlaces(
  context: StepContext,
  points: Points,
  pass: Pass,
  proving: Proving,
): Promise<void> {
  const names = context.underTest.modules.map(({ name }) => name);
  const own = names.indexOf(pass.of ?? '');
  const looks = [await lookAt(context, points, pass, proving)];
  for (const name of own < 0 ? names : [names[own] ?? '']) {
    looks.push(await lookWithout(context, points, pass, proving, name));
  }
  if (own >= 0 && told(context, looks, proving).get(names[own] ?? '')?.kind === 'none') {
    for (const name of names.slice(own + 1)) {
      looks.push(await lookWithout(context, points, pass, proving, name));
    }
  }
  conclude(context, looks, proving);
}

async function lookWithout(
  context: StepContext,
  points: Points,
  pass: Pass,
  proving: Proving,
  name: string,
): Promise<ProofLook> {
  try {
    await askToDo(context, {
      name: `unplug-${name}`,
      text: `Pull the mains plug (or the input) of ${name}, and only of ${name}. Nothing else is touched.`,
      act: `unplug ${name}`,
    });
    const look = await lookAt(context, points, pass, proving, name);
    await askToDo(context, {
      name: `plug-in-${name}`,
      text: `Plug ${name} in again.`,
      act: `plug in ${name}`,
    });
    await context.clock.sleep(startUp, context.signal);
    return look;
  } catch (error) {
    sayWhatIsLeft(context, `the proof of the places ended early: ${name} may still be unplugged`);
    throw error;
  }
}

/** One point of the proof, of all that the pass reaches; the load is off before and after it. */
async function lookAt(
  context: StepContext,
  points: Points,
  { taps, of }: Pass,
  { current, dwell, readings }: Proving,
  unplugged?: string,
): Promise<ProofLook> {
  const { bench, underTest, signal } = context;
  signal.throwIfAborted();
  const loaded = underTest.circuit === 'parallel';
  await bench.load.unload();
  if (loaded) await bench.load.inputOn();
  const about = unplugged ?? of;
  const seen = await points.take({
    phase: 'proof',
    set: loaded ? { current } : {},
    ...(about === undefined ? {} : { of: about }),
    dwell,
    readings,
    wanted: { taps },
    judge: () => 'measured',
  });
  await bench.load.unload();
  await bench.load.inputOff();
  const read = new Map<string, Volts>();
  for (const { place, at } of tapsOf(underTest)) {
    const volts = seen.taps.get(at)?.mean;
    const module = underTest.modules[place - 1];
    if (volts !== undefined && module !== undefined) read.set(module.name, volts);
  }
  const look = { unplugged, read };
  checkSigns(context, look);
  checkLabels(context, look, 'any');
  return look;
}

/** No place reads backwards; one that hardly carries with all plugged in shows its sign only when another is unplugged. */
function checkSigns(context: StepContext, { read, unplugged }: ProofLook): void {
  const usual = Math.max(0, ...[...read.values()].map(Math.abs));
  const least = -Math.max(3 * errorAtZero(context), usual / 10);
  for (const [name, volts] of read) {
    if (name !== unplugged && volts < least) throw reversed(context.underTest, name);
  }
}

/** In a stack with all plugged in each module reads about what its label says, or, swapped, what another's does. */
function checkLabels({ underTest }: StepContext, { read, unplugged }: ProofLook, whose: 'own' | 'any'): void {
  if (underTest.circuit !== 'series' || unplugged !== undefined) return;
  for (const [name, volts] of read) {
    const labels = underTest.modules.filter((module) => whose === 'any' || module.name === name);
    if (labels.some(({ rated }) => Math.abs(volts - rated.voltage) <= rated.voltage * offLabel)) continue;
    const own = underTest.modules.find((module) => module.name === name)?.rated.voltage ?? Number.NaN;
    throw elsewhere(`at the place of ${name} ${volts.toFixed(2)} V is read, and its label says ${own} V`);
  }
}

function told(context: StepContext, looks: readonly ProofLook[], { current }: Proving) {
  return tellPlaces(
    looks,
    Math.max(nothing * usualAt(context.underTest, context.bench, looks, current), errorAtZero(context)),
  );
}

/** What a place that is alive reads: in a stack no less than the smallest label says, in a group up to the whole current. */
function usualAt(
  { circuit, modules }: UnderTest,
  { description }: StepContext['bench'],
  looks: readonly ProofLook[],
  current: Amperes,
): Volts {
  if (circuit === 'series') return Math.min(...modules.map(({ rated }) => rated.voltage));
  const ballasts = (description.group?.places ?? []).map(({ ballast }) => ballast?.resistance ?? 0);
  const evenShare = (current / modules.length) * Math.min(...ballasts);
  return Math.max(evenShare, largestOf(looks));
}

function conclude(context: StepContext, looks: readonly ProofLook[], proving: Proving): void {
  const unsure = errorAtZero(context);
  const largest = largestOf(looks);
  const places = told(context, looks, proving);
  if (largest < tellable * unsure) {
    const why = `no more than ${shown(largest)} is read, and the meter may show ${shown(unsure)} where there is nothing`;
    for (const name of places.keys()) noteUnproved(context, name, why);
    return;
  }
  const [change] = context.underTest.modules.flatMap(({ name }) =>
    [...places].flatMap(([place, one]) =>
      one.kind === 'another' && one.modules.includes(name) ? [{ place, modules: one.modules }] : [],
    ),
  );
  if (change !== undefined) throw swapped(context.underTest, change);
  for (const look of looks) checkLabels(context, look, 'own');
  for (const [name, one] of places) {
    if (one.kind === 'none') throw elsewhere(`${name} was unplugged, and what is read at its place stayed`);
    if (one.kind !== 'untold') continue;
    const others = one.others.join(' or ');
    noteUnproved(
      context,
      name,
      others === ''
        ? 'next to nothing was ever read there'
        : `next to nothing is read there without ${others} either`,
    );
  }
}

function noteUnproved({ journal }: StepContext, name: string, why: string): void {
  journal.append({
    event: 'notice',
    text: `it could not be shown that the place of ${name} is its own: ${why}`,
  });
}

function largestOf(looks: readonly ProofLook[]): Volts {
  return Math.max(0, ...looks.flatMap(({ read }) => [...read.values()].map(Math.abs)));
}

/** The largest half-width that a meter here promises at zero. */
function errorAtZero({ bench }: StepContext): Volts {
  const promises = bench.instruments
    .filter(({ post }) => post === 'meter' || post.startsWith('meter-'))
    .map(({ instrument }) => instrument.driver.accuracy['voltage']?.fixed ?? 0);
  return Math.max(0, ...promises);
}

function shown(volts: Volts): string {
  return formatQuantity(volts, 'voltage', { significant: 2 });
}
