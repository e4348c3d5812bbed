import type { Volts } from '../quantity/quantity.js';
import type { UnfitModule } from './arrangement-error.js';
import type { ModuleProfile } from './module-profile.js';
import type { Selection, SelectionWish } from './selection.js';

/** What of a drawer can be chosen from, by the voltage of the labels, and what is left out and why. */
export interface Drawer {
  readonly byVoltage: readonly { readonly voltage: Volts; readonly modules: readonly ModuleProfile[] }[];
  readonly leftOut: Selection['leftOut'];
}

/**
 * Sorts a drawer. Left out is whatever a record hinders, is recommended for nothing, or, where modules are to
 * stand on others, has not been shown to be isolated. Modules are kept in the order of their names, so that the
 * order in which records were given decides nothing.
 *
 * The supplies are to be alike, so all their modules have one voltage on their labels: groups of unlike ones do
 * not share, and a stack of unlike ones is another supply, which `combine --series` works out.
 */
export function sortedDrawer(
  {
    profiles,
    unfit,
  }: { readonly profiles: readonly ModuleProfile[]; readonly unfit: readonly UnfitModule[] },
  { stack }: Pick<SelectionWish, 'stack'>,
): Drawer {
  const judged = profiles
    .map((profile) => ({ profile, why: whyNot(profile, stack > 1) }))
    .sort((one, other) => byName(one.profile.name, other.profile.name));
  const fit = judged.flatMap(({ profile, why }) => (why === undefined ? [profile] : []));
  const voltages = [...new Set(fit.map(({ label }) => label.voltage))].sort((one, other) => one - other);
  return {
    byVoltage: voltages.map((voltage) => ({
      voltage,
      modules: fit.filter(({ label }) => label.voltage === voltage),
    })),
    leftOut: [
      ...judged.flatMap(({ profile, why }) => (why === undefined ? [] : [{ module: profile.name, why }])),
      ...unfit.map(({ module, why, advice }) => ({ module, why: `${why}: ${advice}` })),
    ],
  };
}

/** K2 before K10, and in the same order wherever it is run. */
function byName(one: string, other: string): number {
  return one.localeCompare(other, 'en', { numeric: true }) || (one < other ? -1 : 1);
}

function whyNot(profile: ModuleProfile, isStacked: boolean): string | undefined {
  const { name, concerns, earth, input, recommended } = profile;
  const hindering = concerns.find(({ weight }) => weight === 'hinders');
  if (hindering !== undefined) return hindering.text;
  if (!(recommended.current > 0)) return `it is recommended for nothing by its records: ${recommended.why}`;
  if (isStacked && input === 'dc') {
    return 'it is fed with DC, and no record shows that its output is cut off from its input';
  }
  return isStacked ? whyNotStacked(name, earth?.relation) : undefined;
}

function whyNotStacked(
  name: string,
  relation: NonNullable<ModuleProfile['earth']>['relation'] | undefined,
): string | undefined {
  switch (relation) {
    case 'isolated':
      return undefined;
    case 'bonded':
      return 'its output is bonded to earth, so it can stand on no other';
    case 'leaky':
      return 'its output leaks to earth, so it can stand on no other';
    case 'undetermined':
      return `how its output stands to earth could not be told: run isolation on ${name} again`;
    case undefined:
      return `how its output stands to earth was never measured: run isolation on ${name}`;
  }
}
