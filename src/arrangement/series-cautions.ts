import { touchable } from '../circuit/touchable.js';
import { highestOf, railVoltsAtMost } from './rails.js';
import type { BondCase, Rail } from './series-build.js';

/** What whoever builds a string must know, a sentence or two each; the heaviest first. */
export function seriesCautions(rails: readonly Rail[], bonds: readonly BondCase[]): readonly string[] {
  const highest = highestOf(rails);
  return [
    'The modules are fed from the mains: their cases stay closed, all are unplugged before anything is wired, and outputs are proved dead with a meter first, as capacitors hold their charge.',
    highest > touchable
      ? `The string reaches ${railVoltsAtMost(highest)}, beyond the ${touchable} V DC that are safe to touch (ES1, IEC 62368-1): cover all of it, so that no rail can be reached without a tool.`
      : `The string stays within the ${touchable} V DC that are safe to touch (ES1, IEC 62368-1), up to ${railVoltsAtMost(highest)}, as long as its 0 V is earthed or nothing is: a fault to the mains inside one module takes that away.`,
    'Earth one point of the string at most, and its 0 V only.',
    ...bonds.slice(1).map(({ sentence }) => sentence),
    'Whatever is joined to an output earths it as well: a meter, an instrument or a load with an earthed 0 V may be joined to the whole string only, never to a module within it.',
    'Each module floats on those below it. All are switched on and off together, from one switched supply.',
    'The diode of a module that has failed carries the whole current and gets hot; find the failed one before the string is used again.',
    'Local codes and a licensed person decide what may be joined to the mains and to earth, and how.',
  ];
}
