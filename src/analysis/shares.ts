import { imbalanceOf } from '../circuit/imbalance.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Ratio } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { combine, type Contribution } from '../statistics/uncertainty-budget.js';
import { type Finding, measured } from './finding.js';
import { amps, percent } from './in-words.js';
import { budgetOf, type GroupLook } from './module-currents.js';

/**
 * `share-of-<module>`: its current over that of all modules, sₖ = Iₖ/ΣI, at a look.
 * @param curve all held looks, for what the note tells of the rest.
 */
export function shareFindings(
  header: RunHeader,
  look: GroupLook,
  curve: readonly GroupLook[],
): readonly Finding[] {
  const sum = sumOf(look);
  const lowest = lowestTold(header, curve);
  const below = lowest === undefined || lowest.total >= look.total ? undefined : lowest;
  const here = carriedAt(look);
  const there = below === undefined ? [] : carriedAt(below);
  return look.currents.map(({ module, current }, index) => {
    const share = current / sum;
    const elsewhere =
      below === undefined ? '' : `; ${percent(there[index]?.share ?? 0)} of ${amps(below.total)}`;
    return measured(`share-of-${module}`, 'ratio', share, shareBudget(header, look, index), {
      step: look.step,
      note: `${amps(here[index]?.current ?? 0)} of ${amps(look.total)}${elsewhere}`,
    });
  });
}

/** ∂sₖ/∂Iⱼ = (δₖⱼ − sₖ)/ΣI, so that whatever scales all currents alike drops out of a share. */
export function shareBudget(header: RunHeader, look: GroupLook, index: number): readonly Contribution[] {
  const sum = sumOf(look);
  const share = (look.currents[index]?.current ?? 0) / sum;
  const modules = look.currents.map((_, other) => ((other === index ? 1 : 0) - share) / sum);
  return budgetOf(header, look, { modules });
}

/**
 * `imbalance`: (largest − smallest)/mean of the modules' currents at a look. Which are the largest and the
 * smallest is taken from what was read; with m = mean, ∂/∂Iⱼ = (δ_max,j − δ_min,j)/m − imbalance/(N·m).
 */
export function imbalanceFinding(
  header: RunHeader,
  look: GroupLook,
  { setting, curve }: { readonly setting: Ratio; readonly curve: readonly GroupLook[] },
): Finding {
  const currents = look.currents.map(({ current }) => current);
  return measured('imbalance', 'ratio', imbalanceOf(currents), imbalanceBudget(header, look), {
    step: look.step,
    note: `at ${amps(look.total)}; ${percent(setting)} asked for${elsewhereInWords(header, look, curve)}`,
  });
}

function imbalanceBudget(header: RunHeader, look: GroupLook): readonly Contribution[] {
  const currents = look.currents.map(({ current }) => current);
  const { length } = currents;
  const mean = sumOf(look) / length;
  const most = currents.indexOf(Math.max(...currents));
  const least = currents.lastIndexOf(Math.min(...currents));
  const modules = currents.map(
    (_, index) => (Number(index === most) - Number(index === least) - imbalanceOf(currents) / length) / mean,
  );
  return budgetOf(header, look, { modules });
}

/** An imbalance at light load that is known no better than this says nothing. */
const worthTelling: Ratio = 0.2;

/** The lightest load at which the shares were still told apart well enough to be told. */
function lowestTold(header: RunHeader, curve: readonly GroupLook[]): GroupLook | undefined {
  return curve.find(
    (look) => sumOf(look) > 0 && combine(imbalanceBudget(header, look)).expanded < worthTelling,
  );
}

function elsewhereInWords(header: RunHeader, look: GroupLook, curve: readonly GroupLook[]): string {
  const lowest = lowestTold(header, curve);
  const first = curve.find(({ set, step }) => set === look.set && step === look.step);
  const at = ({ currents }: GroupLook): string =>
    percent(within(0, imbalanceOf(currents.map(({ current }) => current)), currents.length));
  const below =
    lowest === undefined || lowest.total >= look.total ? '' : `; ${at(lowest)} at ${amps(lowest.total)}`;
  if (first === undefined || first === look) return below;
  const held = formatQuantity(lastTime(look) - lastTime(first), 'time', { significant: 2 });
  return `${below}; ${at(first)} when that was reached, ${held} before`;
}

/** What is nothing reads a little above or below it, and as little beyond all; a note says no more than that. */
function within(least: number, value: number, most: number): number {
  return Math.min(most, Math.max(least, value));
}

function lastTime({ points }: GroupLook): number {
  return Math.max(...points.map(({ t }) => t));
}

/** What a module carried. */
export interface Carried {
  readonly module: string;
  readonly share: Ratio;
  readonly current: Amperes;
}

/**
 * What each module carried, in words: its share of the load's current, so that what a reader adds up is what
 * the load takes, and nobody is said to carry less than nothing.
 */
export function carriedAt(look: GroupLook): readonly Carried[] {
  const sum = sumOf(look);
  return look.currents.map(({ module, current }) => {
    const share = within(0, current / sum, 1);
    return { module, share, current: share * look.total };
  });
}

export function sumOf({ currents }: GroupLook): Amperes {
  return currents.reduce((sum, { current }) => sum + current, 0);
}

/** Which carries most and which least. */
export function extremesOf({ currents }: GroupLook): { readonly most: string; readonly least: string } {
  const falling = [...currents].sort((one, other) => other.current - one.current);
  return { most: falling[0]?.module ?? '', least: falling.at(-1)?.module ?? '' };
}
