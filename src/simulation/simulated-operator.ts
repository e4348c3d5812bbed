import type { Clock } from '../clock/clock.js';
import type { Seconds } from '../quantity/quantity.js';
import { UnknownActError } from './simulation-errors.js';
import type { ProbePlace, Probes } from './probes.js';
import { UnknownModuleError } from './unknown-module-error.js';
import type { VirtualBench } from './virtual-bench.js';

/** Where an operator stands: the bench, and the clock whose time `began` was the bench's 0. */
export interface Stage {
  readonly bench: VirtualBench;
  readonly probes: Probes;
  readonly clock: Clock;
  readonly began: Seconds;
}

/** A hand to the plug. */
const TIME_TO_PLUG: Seconds = 2;
/** Long enough for what is stored in a module to bleed off, so that a latch is really cleared. */
const TIME_TO_CYCLE: Seconds = 10;
/** Both tips taken up, and held to each other or apart. */
const TIME_FOR_LEADS: Seconds = 3;
/** Both tips put on two points and held there. */
const TIME_TO_PROBE: Seconds = 5;

type Act = (stage: Stage) => Promise<void>;

const acts: ReadonlyMap<string, Act> = new Map<string, Act>([
  ['unplug', (stage) => plugEach(stage, 'absent')],
  ['plug in', (stage) => plugEach(stage, 'present')],
  ['cycle input', cycle],
  ['leads together', (stage) => hold(stage, TIME_FOR_LEADS, { kind: 'together' })],
  ['leads apart', (stage) => hold(stage, TIME_FOR_LEADS, { kind: 'apart' })],
  ['probe the output', (stage) => hold(stage, TIME_TO_PROBE, undefined)],
  [
    'probe earth and 0 V',
    (stage) => hold(stage, TIME_TO_PROBE, { kind: 'earth-of', module: stage.bench.module.name }),
  ],
]);

/** Acts on the module of that name, wherever it sits in the circuit. */
const actsOnOne: ReadonlyMap<string, (stage: Stage, module: string) => Promise<void>> = new Map([
  ['unplug', (stage: Stage, module: string) => plug(stage, 'absent', module)],
  ['plug in', (stage: Stage, module: string) => plug(stage, 'present', module)],
  ['probe earth and 0 V of', probing('earth-of')],
  ['probe ballast of', probing('ballast-of')],
  ['probe output of', probing('output-of')],
]);

/** The acts that a simulated operator knows how to do. */
export const knownActs: readonly string[] = [
  ...acts.keys(),
  ...[...actsOnOne.keys()].map((act) => `${act} <module>`),
];

/**
 * Does what a person would be asked to do, and takes about as long over it.
 * @throws UnknownActError, UnknownModuleError
 */
export async function performAct(stage: Stage, act: string): Promise<void> {
  const perform = acts.get(act);
  if (perform !== undefined) {
    await perform(stage);
    return;
  }
  const end = act.lastIndexOf(' ');
  const onOne = actsOnOne.get(act.slice(0, Math.max(0, end)));
  const module = act.slice(end + 1);
  if (onOne === undefined || module === '') throw new UnknownActError({ act, known: knownActs });
  const modules = stage.bench.modules.map(({ name }) => name);
  if (!modules.includes(module)) throw new UnknownModuleError({ module, modules });
  await onOne(stage, module);
}

async function plugEach(stage: Stage, input: 'present' | 'absent'): Promise<void> {
  for (const { name } of stage.bench.modules) await plug(stage, input, name);
}

async function plug(
  { bench, clock, began }: Stage,
  input: 'present' | 'absent',
  module: string,
): Promise<void> {
  await clock.sleep(TIME_TO_PLUG);
  bench.setInput(input, clock.now() - began, module);
}

async function cycle({ bench, clock, began }: Stage): Promise<void> {
  bench.setInput('absent', clock.now() - began);
  await clock.sleep(TIME_TO_CYCLE);
  bench.setInput('present', clock.now() - began);
}

function probing(kind: 'earth-of' | 'ballast-of' | 'output-of') {
  return (stage: Stage, module: string): Promise<void> => hold(stage, TIME_TO_PROBE, { kind, module });
}

/** On the way from one place to the next the probes touch nothing. */
async function hold({ probes, clock }: Stage, time: Seconds, place: ProbePlace | undefined): Promise<void> {
  probes.move({ kind: 'apart' });
  await clock.sleep(time);
  probes.move(place);
}

/** The person at a simulated bench: does the acts, and answers as the simulation section says. */
export interface SimulatedOperator {
  /** @throws UnknownActError, UnknownModuleError */
  act(name: string): Promise<void>;
  /** By the step's name; undefined when the simulation gives no answer. */
  answer(name: string): string | undefined;
}

export function simulatedOperator(
  stage: Stage,
  answers: Readonly<Record<string, string>>,
): SimulatedOperator {
  return {
    act: (name) => performAct(stage, name),
    answer: (name) => (Object.hasOwn(answers, name) ? answers[name] : undefined),
  };
}
