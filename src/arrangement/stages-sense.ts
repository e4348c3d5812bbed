import { volts } from '../analysis/in-words.js';
import { listed } from '../quantity/listed.js';
import type { Watts } from '../quantity/quantity.js';
import { UnfitRecordsError, UnfitWishError } from './arrangement-error.js';
import { modulesOf } from './build.js';
import type { ModuleProfile } from './module-profile.js';
import { type LinearStage, sequences, type StagesWish } from './stages-wish.js';

/**
 * What can't be worked out, whatever the records say. A stages file is checked for most of it where it is read;
 * who brings a wish of another origin is told here.
 * @throws UnfitWishError
 */
export function requireStages({
  arrangements,
  linearStage,
  output,
  hysteresis,
  ballast,
  sequence,
}: StagesWish): void {
  const refuse = (problem: string, advice: string): never => {
    throw new UnfitWishError(problem, advice);
  };
  if (arrangements.length === 0) {
    refuse(
      'There is no arrangement',
      'Say which groups and stacks the switching makes, and by which contacts.',
    );
  }
  for (const { name, form } of arrangements) {
    const modules = modulesOf(form);
    if (modules.length === 0) refuse(`${name} has no modules`, 'Name the modules of each arrangement.');
    const twice = modules.find((module, index) => modules.indexOf(module) < index);
    if (twice !== undefined) refuse(`${twice} stands in two places of ${name}`, 'Name each module once.');
  }
  if (!isAbove0(linearStage.dropOut)) {
    refuse(
      `A drop-out of ${linearStage.dropOut} V is none: a linear stage needs some voltage to regulate with`,
      'Give what its data say at full current, 2 V or more for most.',
    );
  }
  if (!isAbove0(linearStage.current)) {
    refuse(`A linear stage of ${linearStage.current} A passes nothing`, 'Give its current limit.');
  }
  if (!isAbove0(dissipationOf(linearStage))) {
    refuse(
      'The linear stage may turn nothing into heat, so it can pass nothing',
      'Give what it may dissipate on its heat sink, and a case temperature at which something is left of it.',
    );
  }
  if (!(output.from >= 0 && output.to > output.from && output.to < Infinity)) {
    refuse(
      `An output from ${output.from} V to ${output.to} V is none`,
      'Give the lowest first, 0 V or more, and then a higher one.',
    );
  }
  if (!isAbove0(hysteresis)) {
    refuse(
      `With a hysteresis of ${hysteresis} V the contacts would chatter at each switch-over`,
      'Give a hysteresis above 0 V, such as 1 V.',
    );
  }
  if (
    ballast !== undefined &&
    !(isAbove0(ballast.resistance) && ballast.tolerance >= 0 && ballast.tolerance < 1)
  ) {
    refuse(
      'A ballast needs a resistance above 0 Ω and a tolerance below 100 %',
      'Leave it out where there is none.',
    );
  }
  if (!sequences.includes(sequence)) {
    refuse(`There is no sequence called '${sequence as string}'`, `Take one of ${listed(sequences)}.`);
  }
}

function isAbove0(value: number): boolean {
  return value > 0 && value < Infinity;
}

/** @throws UnfitRecordsError for modules of the arrangements of which there is no profile. */
export function requireRecords(profiles: readonly ModuleProfile[], { arrangements }: StagesWish): void {
  const known = profiles.map(({ name }) => name);
  const wanted = new Set(arrangements.flatMap(({ form }) => modulesOf(form)));
  const missing = [...wanted].filter((name) => !known.includes(name));
  if (missing.length === 0) return;
  const others = known.filter((name) => !wanted.has(name));
  const besides = others.length > 0 ? `, though there are some of ${listed(others)}` : '';
  throw new UnfitRecordsError(
    missing.map((module) => ({
      module,
      why: `none of the records is of it${besides}`,
      advice: `see that the records named for each module are its own`,
    })),
  );
}

/** What the linear stage may turn into heat, on a straight line between the two case temperatures. */
export function dissipationOf({ dissipation }: LinearStage): Watts {
  if (dissipation.kind === 'fixed') return dissipation.most;
  const { full, fullTo, noneAt, case: hottest } = dissipation;
  return full * Math.min(1, Math.max(0, (noneAt - hottest) / (noneAt - fullTo)));
}

/**
 * @param ups the output voltages at which it is switched up, in the order of the arrangements.
 * @throws UnfitWishError where a switch-over would not come back, or would come back past the one before.
 */
export function requireHysteresis(
  ups: readonly { readonly lower: string; readonly upper: string; readonly up: number }[],
  { hysteresis, output }: StagesWish,
): void {
  for (const [index, { lower, upper, up }] of ups.entries()) {
    const before = ups[index - 1];
    const floor = before === undefined ? output.from : before.up;
    if (up - hysteresis > floor || (before === undefined && up <= output.from)) continue;
    const problem =
      before === undefined
        ? `From ${upper} it would never come back to ${lower}: it is switched up at ${volts(up)}, and with a hysteresis of ${volts(hysteresis)} down below ${volts(output.from)}, the lowest output`
        : `The switch-overs to ${before.upper} at ${volts(before.up)} and to ${upper} at ${volts(up)} lie no further apart than the hysteresis of ${volts(hysteresis)}`;
    throw new UnfitWishError(
      problem,
      'Take less hysteresis, or leave out an arrangement whose voltage is hardly more than that of the one before.',
    );
  }
}
