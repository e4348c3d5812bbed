import { formatQuantity } from '../quantity/format-quantity.js';
import { askToDo } from './ask-to-do.js';
import type { StepContext } from './step-kind.js';

/**
 * In one step, by the source: a search by halves to its finest needs some ten. Nobody stands there to see that a
 * module is being worn out.
 */
export const mostCycles = 12;

/**
 * Cycles the input of a module that has latched off, with the load off: by the source that feeds it, or by asking
 * whoever is there. Whether it was done; where it was not, the journal says why.
 * @throws SourceWentOffError, DisobeyedError; the signal's reason when the run is stopped meanwhile
 */
export async function clearLatch(context: StepContext): Promise<boolean> {
  const { bench, journal, operator } = context;
  if (bench.source !== undefined) return bySource(context, bench.source);
  if (!operator.present) {
    journal.append({
      event: 'notice',
      text: 'the module has latched off and nobody is here to cycle its input',
    });
    return false;
  }
  await byHand(context);
  return true;
}

async function bySource(
  { journal, signal, latches }: StepContext,
  source: NonNullable<StepContext['bench']['source']>,
): Promise<boolean> {
  if (latches.cleared >= mostCycles) {
    journal.append({
      event: 'notice',
      text: `the module has latched off; its input was cycled ${mostCycles} times in this step, and is not cycled again`,
    });
    return false;
  }
  latches.cleared += 1;
  const away = formatQuantity(source.feed.offFor, 'time');
  journal.append({
    event: 'notice',
    text:
      `the module has latched off; the source at ${source.address} takes its input away for ${away} ` +
      `(${latches.cleared} of at most ${mostCycles} times in this step)`,
  });
  await source.cycle(signal);
  return true;
}

function byHand(context: StepContext): Promise<void> {
  return askToDo(context, {
    name: 'cycle-input',
    text:
      context.underTest.modules.length === 1
        ? 'The module has switched itself off and stays off. Unplug it, wait until its lamp is out (half a minute), plug it in again.'
        : 'What is connected has switched itself off and stays off. Unplug all modules, wait until their lamps are out (half a minute), plug them in again.',
    act: 'cycle input',
  });
}
