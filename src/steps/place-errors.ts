import { WrongPlaceError } from '../bench/wrong-place-error.js';
import type { UnderTest } from './under-test.js';

/** @param change a place, by the module that is said to stand there, and the modules of which one stands there. */
export function swapped(
  { modules }: UnderTest,
  change: { readonly place: string; readonly modules: readonly [string, ...string[]] },
): WrongPlaceError {
  const place = modules.findIndex(({ name }) => name === change.place) + 1;
  const [module] = change.modules;
  return new WrongPlaceError(
    'modules-swapped',
    `${module} was unplugged, and it was the place of ${change.place} that went dead: ` +
      `${change.modules.join(' or ')} stands in place ${place}`,
    'wire them in the order in which --module names them, or name them in the order in which they are wired',
  );
}

export function reversed({ circuit }: UnderTest, module: string): WrongPlaceError {
  const across = circuit === 'parallel' ? 'ballast' : 'output';
  return new WrongPlaceError(
    'probes-reversed',
    `the probes across the ${across} of ${module} are reversed: it reads below zero`,
    circuit === 'parallel'
      ? "plus belongs at the module's end of the ballast, minus at the common output"
      : "plus belongs at the module's plus, minus at its 0 V",
  );
}

export function elsewhere(found: string): WrongPlaceError {
  return new WrongPlaceError(
    'probes-elsewhere',
    found,
    'the probes or the scanner are not where the bench file has them, a channel is stuck, or another module was unplugged',
  );
}
