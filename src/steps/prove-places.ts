import { WrongPlaceError } from '../bench/wrong-place-error.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Ratio, Seconds, Volts } from '../quantity/quantity.js';
import type { RunningMoments } from '../statistics/running-moments.js';
import { askToDo } from './ask-to-do.js';
import type { Pass } from './place-passes.js';
import type { Points } from './point.js';
import type { StepContext } from './step-kind.js';
import { tapsOf } from './under-test.js';

/** What a proof is made with. */
export interface Proving {
  /** In a group, what the modules carry while one of them is unplugged. */
  readonly current: Amperes;
  readonly dwell: Seconds;
  readonly readings: number;
}

/** A place reads nothing when it reads less than this part of what it, or the largest of the others, read before. */
const nothing: Ratio = 0.2;
/** What is read must be this many times what the meter promises at zero before a place can be told dead from alive. */
const tellable = 4;
/** How far from its label a module's voltage may be before it is something else that is read. */
const offLabel: Ratio = 0.25;
/** What a supply takes to start. */
const startUp: Seconds = 2;

type Read = ReadonlyMap<string, Volts>;

/**
 * Shows that what is read at a place comes from the module that is said to stand there, by unplugging one
 * after the other: its place must go dead, and no other. In a group a small current shows it, in a stack the
 * open voltages do. In this way swapped modules, probes at another place, swapped probes and a scanner whose
 * channel is stuck are found before anything is made of the readings.
 * @throws WrongPlaceError naming what was found and where.
 */
export async function provePlaces(
  context: StepContext,
  points: Points,
  pass: Pass,
  proving: Proving,
): Promise<void> {
  const before = await look(context, points, pass, proving, undefined);
  checkSigns(context, before, undefined);
  const unsure = errorAtZero(context);
  for (const { name } of context.underTest.modules) {
    if (pass.of !== undefined && pass.of !== name) continue;
    await askToDo(context, {
      name: `unplug-${name}`,
      text: `Pull the mains plug (or the input) of ${name}, and only of ${name}. Nothing else is touched.`,
      act: `unplug ${name}`,
    });
    const without = await look(context, points, pass, proving, name);
    await askToDo(context, {
      name: `plug-in-${name}`,
      text: `Plug ${name} in again.`,
      act: `plug in ${name}`,
    });
    await context.clock.sleep(startUp, context.signal);
    checkSigns(context, without, name);
    const largest = Math.max(...[...before.values(), ...without.values()].map(Math.abs));
    if (largest < tellable * unsure) {
      context.journal.append({
        event: 'notice',
        text:
          `it could not be shown that the place of ${name} is its own: no more than ${shown(largest)} is read, ` +
          `and the meter may show ${shown(unsure)} where there is nothing`,
      });
      continue;
    }
    checkProof(context, name, before, without, Math.max(nothing * largest, unsure));
  }
}

/** One point of the proof, of all that the pass reaches; the load is off before and after it. */
async function look(
  { bench, underTest, signal }: StepContext,
  points: Points,
  { taps, of }: Pass,
  { current, dwell, readings }: Proving,
  unplugged: string | undefined,
): Promise<Read> {
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
  return meansOf(seen.taps);
}

function meansOf(taps: ReadonlyMap<string, RunningMoments>): Read {
  return new Map([...taps].map(([at, moments]) => [at, moments.mean]));
}

/**
 * No place reads backwards; one that hardly carries with all plugged in shows its sign only when another is
 * unplugged. In a stack with all plugged in each module reads about what its label says.
 */
function checkSigns(context: StepContext, read: Read, unplugged: string | undefined): void {
  const { underTest } = context;
  const least = 3 * errorAtZero(context);
  const usual = Math.max(0, ...[...read.values()].map(Math.abs));
  for (const { place, at } of tapsOf(underTest)) {
    const volts = read.get(at);
    const module = underTest.modules[place - 1];
    if (volts === undefined || module === undefined || module.name === unplugged) continue;
    if (volts < -Math.max(least, usual / 10)) throw reversed(underTest.circuit, module.name);
    const { voltage } = module.rated;
    const isAsked = underTest.circuit === 'series' && unplugged === undefined;
    if (isAsked && Math.abs(volts - voltage) > voltage * offLabel) {
      throw elsewhere(
        `at the place of ${module.name} ${volts.toFixed(2)} V is read, and its label says ${voltage} V`,
      );
    }
  }
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

/** @param dead a place that reads less than this is dead. */
function checkProof(
  { underTest }: StepContext,
  unplugged: string,
  before: Read,
  without: Read,
  dead: Volts,
): void {
  const taps = tapsOf(underTest);
  const own = taps.find(({ place }) => underTest.modules[place - 1]?.name === unplugged);
  if (own === undefined || !without.has(own.at)) return;
  const isDead = (read: Read, at: string): boolean => Math.abs(read.get(at) ?? Number.NaN) <= dead;
  if (isDead(without, own.at)) return;
  const other = taps.find(({ at }) => at !== own.at && isDead(without, at) && !isDead(before, at));
  const standing = other === undefined ? undefined : underTest.modules[other.place - 1]?.name;
  if (other !== undefined && standing !== undefined) {
    throw new WrongPlaceError(
      'modules-swapped',
      `${unplugged} was unplugged, and it was the place of ${standing} that went dead: ` +
        `${unplugged} stands in place ${other.place}`,
      'wire them in the order in which --module names them, or name them in the order in which they are wired',
    );
  }
  throw elsewhere(`${unplugged} was unplugged, and what is read at its place stayed`);
}

function reversed(circuit: StepContext['underTest']['circuit'], module: string): WrongPlaceError {
  const across = circuit === 'parallel' ? 'ballast' : 'output';
  return new WrongPlaceError(
    'probes-reversed',
    `the probes across the ${across} of ${module} are reversed: it reads below zero`,
    circuit === 'parallel'
      ? "plus belongs at the module's end of the ballast, minus at the common output"
      : "plus belongs at the module's plus, minus at its 0 V",
  );
}

function elsewhere(found: string): WrongPlaceError {
  return new WrongPlaceError(
    'probes-elsewhere',
    found,
    'the probes or the scanner are not where the bench file has them, a channel is stuck, or another module was unplugged',
  );
}
