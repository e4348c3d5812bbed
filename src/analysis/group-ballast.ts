import { type Ballast, type BallastOutcome, smallestBallast } from '../circuit/ballast.js';
import { resistorRating } from '../circuit/resistor-rating.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Ratio } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { type Finding, inWords } from './finding.js';
import { amps, givenPercent, percent } from './in-words.js';
import type { ModuleLine } from './module-lines.js';

/**
 * `recommended-ballast`: the smallest preferred value that keeps the modules within the imbalance asked for
 * at the highest load that the group held, in the worst case of all uncertainties. 0 Ω where they share well
 * enough joined directly; the word `none` where no ballast does it, with the reason; `undetermined` where a
 * module carried too little to know its own line.
 */
export function recommendedBallast(
  header: RunHeader,
  lines: ReadonlyMap<string, ModuleLine>,
  wanted: {
    readonly load: Amperes;
    readonly imbalance: Ratio;
    readonly tolerance: Ratio;
    readonly step: number;
  },
): Finding {
  const { load, tolerance, step } = wanted;
  const imbalance = Math.min(wanted.imbalance, 0.99);
  const missing = header.modules.filter(({ name }) => !lines.has(name)).map(({ name }) => name);
  if (missing.length > 0) {
    const note = `${missing.join(', ')} carried too little in the group to know ${missing.length === 1 ? 'its' : 'their'} own voltage and droop; run real-limit on ${missing.length === 1 ? 'it' : 'each'} alone`;
    return inWords('recommended-ballast', 'undetermined', { step, note });
  }
  const outcome = smallestBallast({
    modules: [...lines.values()].map(({ openCircuit, droop }) => ({
      openCircuit,
      droop: { value: Math.max(0, droop.value), expanded: droop.expanded },
    })),
    load,
    imbalance,
    tolerance,
    series: 'E12',
  });
  const asked = `${percent(imbalance)} at ${amps(load)}`;
  switch (outcome.kind) {
    case 'found':
      return chosen(outcome.value, foundInWords(outcome, { load, tolerance }), step);
    case 'unneeded':
      return chosen(
        0,
        `joined directly they stay within ${asked}: ${percent(outcome.imbalance)} at worst`,
        step,
      );
    case 'too-coarse':
    case 'too-costly':
      return inWords('recommended-ballast', 'none', {
        step,
        note: whyNoBallast(outcome, { tolerance, asked: `where ${asked} are asked for` }),
      });
  }
}

function chosen(value: number, note: string, step: number): Finding {
  return {
    name: 'recommended-ballast',
    value,
    dimension: 'resistance',
    standardUncertainty: null,
    interval: null,
    step,
    note,
    budget: [],
    factors: [],
  };
}

function foundInWords(
  { imbalance, dissipation, voltageCost, value }: Ballast,
  { load, tolerance }: { readonly load: Amperes; readonly tolerance: Ratio },
): string {
  const rating = resistorRating(dissipation);
  const watts = formatQuantity(dissipation, 'power', { significant: 2 });
  const take =
    rating === undefined ? 'more than one resistor carries' : `take ${formatQuantity(rating, 'power')} ones`;
  return (
    `${formatQuantity(value, 'resistance')} ± ${givenPercent(tolerance)} in each: at worst ${percent(imbalance)} imbalance at ${amps(load)}, ` +
    `up to ${watts} of heat in one (${take}), costs ${formatQuantity(voltageCost, 'voltage', { significant: 2 })}`
  );
}

/** Why no resistor does what is asked of a ballast; `asked` reads after a number: `where 10 % are asked for`. */
export function whyNoBallast(
  outcome: Extract<BallastOutcome, { kind: 'too-coarse' | 'too-costly' }>,
  { tolerance, asked }: { readonly tolerance: Ratio; readonly asked: string },
): string {
  const left = formatQuantity(roundedUp(outcome.imbalance), 'ratio', { significant: 3 });
  if (outcome.kind === 'too-coarse') {
    return `resistors of ± ${givenPercent(tolerance)} alone may unbalance them by ${left} ${asked}: take closer ones`;
  }
  return outcome.largest === 0
    ? `not even the smallest resistor leaves enough voltage, ${asked}`
    : `${formatQuantity(outcome.largest, 'resistance')}, more than which would cost a tenth of the voltage, may still leave ${left} ${asked}: the modules are too unlike, choose others`;
}

/** To a tenth of a percent, and never down: what misses the limit by little must not read as if it met it. */
function roundedUp(imbalance: Ratio): Ratio {
  return Math.ceil(imbalance * 1000 - 1e-9) / 1000;
}
