import type { Tap } from '../bench/sample.js';
import type { StepContext } from './step-kind.js';
import { askToDo } from './ask-to-do.js';
import { sayWhatIsLeft } from './left-behind.js';
import { tapsOf } from './under-test.js';

/** One way through the points of a step, with the taps that are read on it. */
export interface Pass {
  readonly taps: readonly Tap[];
  /** The module whose place is looked at, where it is one only. */
  readonly of: string | undefined;
}

/**
 * How the places of a circuit are gone through on this bench: all at once where a scanner or meters of their
 * own reach them; else once for each, the operator moving the probes before it. `each` is one pass; the
 * probes are back at their usual place afterwards.
 */
export async function passThrough(
  context: StepContext,
  each: (pass: Pass) => Promise<'go-on' | 'enough'>,
): Promise<void> {
  const { bench, underTest } = context;
  const taps = tapsOf(underTest);
  if (bench.description.group?.measuredBy !== 'operator') {
    await each({ taps, of: undefined });
    return;
  }
  try {
    for (const tap of taps) {
      const module = underTest.modules[tap.place - 1]?.name ?? '';
      await moveProbes(context, tap, module);
      if ((await each({ taps: [tap], of: module })) === 'enough') break;
    }
    await probesBack(context);
  } catch (error) {
    sayWhatIsLeft(context, "it ended early: the meter's probes may still be across one module's place");
    throw error;
  }
}

/** Nobody reaches for the probes while a current flows. */
async function moveProbes(context: StepContext, { at }: Tap, module: string): Promise<void> {
  const { bench, underTest } = context;
  await bench.load.inputOff();
  const across = underTest.circuit === 'parallel' ? 'ballast' : 'output';
  const [plus, minus] =
    across === 'ballast' ? ["the module's end", 'the end at the common output'] : ['its plus', 'its 0 V'];
  await askToDo(context, {
    name: `probe-${module}`,
    text: `Put the meter's probes across the ${across} of ${module}: plus at ${plus}, minus at ${minus}.`,
    act: `probe ${across} of ${module}`,
  });
  bench.places.movedTo(at);
}

async function probesBack(context: StepContext): Promise<void> {
  await context.bench.load.inputOff();
  await askToDo(context, {
    name: 'probe-output',
    text: "Put the meter's probes back across the output of the whole, where the bench file has them.",
    act: 'probe the output',
  });
  context.bench.places.movedTo(undefined);
}
