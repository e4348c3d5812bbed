import type { Clock } from '../clock/clock.js';
import type { Seconds } from '../quantity/quantity.js';
import { UnknownActError } from './simulation-errors.js';
import type { VirtualBench } from './virtual-bench.js';

/** Where an operator stands: the bench, and the clock whose time `began` was the bench's 0. */
export interface Stage {
  readonly bench: VirtualBench;
  readonly clock: Clock;
  readonly began: Seconds;
}

/** A hand to the plug. */
const TIME_TO_PLUG: Seconds = 2;
/** Long enough for what is stored in a module to bleed off, so that a latch is really cleared. */
const TIME_TO_CYCLE: Seconds = 10;

const acts = new Map<string, (stage: Stage) => Promise<void>>([
  ['unplug', (stage) => afterwards(stage, TIME_TO_PLUG, 'absent')],
  ['plug in', (stage) => afterwards(stage, TIME_TO_PLUG, 'present')],
  [
    'cycle input',
    async (stage) => {
      await afterwards(stage, 0, 'absent');
      await afterwards(stage, TIME_TO_CYCLE, 'present');
    },
  ],
]);

/** The acts that a simulated operator knows how to do. */
export const knownActs: readonly string[] = [...acts.keys()];

/**
 * Does what a person would be asked to do, and takes about as long over it.
 * @throws UnknownActError
 */
export async function performAct(stage: Stage, act: string): Promise<void> {
  const perform = acts.get(act);
  if (perform === undefined) throw new UnknownActError({ act, known: knownActs });
  await perform(stage);
}

async function afterwards(
  { bench, clock, began }: Stage,
  delay: Seconds,
  input: 'present' | 'absent',
): Promise<void> {
  await clock.sleep(delay);
  bench.setInput(input, clock.now() - began);
}

/** The person at a simulated bench: does the acts, and answers as the simulation section says. */
export interface SimulatedOperator {
  /** @throws UnknownActError */
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
