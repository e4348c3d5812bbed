import { amps } from '../analysis/in-words.js';
import { touchable } from '../circuit/touchable.js';
import { listed } from '../quantity/listed.js';
import type { Amperes } from '../quantity/quantity.js';
import { addedUp } from './added-up.js';
import { UnfitWishError } from './arrangement-error.js';
import { bondsOf } from './bonds.js';
import type { Circuit, Estimate, Recommendation } from './build.js';
import { leastOf } from './least-of.js';
import type { ModuleProfile } from './module-profile.js';
import { pastTheLimit } from './past-the-limit.js';
import { highestOf, railsOf } from './rails.js';
import { reverseDiodesOf } from './reverse-diodes.js';
import type { SeriesBuild, SeriesWish } from './series-build.js';
import { seriesCautions } from './series-cautions.js';
import { seriesParts } from './series-parts.js';
import { seriesStanding } from './series-standing.js';
import { worstOf } from './worst-form.js';

/** That it is the weakest, before it is called so without an if. */
const surely = 0.95;
const curvePoints = 101;

/**
 * Modules one upon the other, worked out. The weakest sets the current, the voltages add up, each stands on
 * those below it. Of a string that may not be built, or of which that can't be told, everything is given but
 * the parts to buy. V, A, W.
 * @param profiles the lowest first.
 * @throws UnfitWishError for fewer than two modules, one that stands in two places, a load that is none.
 */
export function buildSeries(profiles: readonly ModuleProfile[], wish: SeriesWish): SeriesBuild {
  requireSense(profiles, wish);
  const least = leastOf(profiles.map(({ usable }) => usable));
  const recommended = recommendationOf(profiles);
  const load =
    wish.load === undefined
      ? ({ current: recommended.current, from: 'recommended' } as const)
      : ({ current: wish.load, from: 'asked-for' } as const);
  const rails = railsOf(profiles);
  const diodes = reverseDiodesOf(profiles);
  const bonds = bondsOf(rails);
  const { standing, concerns } = seriesStanding(profiles, {
    rails,
    recommended: recommended.current,
    load: load.current,
  });
  return {
    kind: 'series',
    wish,
    modules: profiles,
    standing,
    concerns,
    load,
    openVoltage: voltageAt(profiles, 0),
    voltageAtLoad: voltageUnder(profiles, { load: load.current, usable: least.estimate }),
    usable: least.estimate,
    recommended,
    weakest: weakestOf(profiles, least),
    rails,
    beyondTouchable: highestOf(rails) > touchable,
    diodes,
    bonds,
    curve: curveOf(profiles, least.estimate.value),
    circuit: stacked(profiles),
    parts: standing.kind === 'may-be-built' ? seriesParts(profiles, diodes) : [],
    cautions: seriesCautions(rails, bonds),
  };
}

function requireSense(profiles: readonly ModuleProfile[], { load }: SeriesWish): void {
  const names = profiles.map(({ name }) => name);
  if (names.length < 2) {
    throw new UnfitWishError(
      names.length === 0 ? 'there is no module to stack' : `${listed(names)} alone is no string`,
      'Give the records of two modules at least, the lowest first.',
    );
  }
  const twice = names.filter((name, index) => names.indexOf(name) !== index);
  if (twice.length > 0) {
    throw new UnfitWishError(
      `${listed([...new Set(twice)])} can't stand in two places of a string`,
      'Name each module once.',
    );
  }
  if (load !== undefined && !(load > 0 && Number.isFinite(load))) {
    throw new UnfitWishError(
      `a load of ${amps(load)} is none`,
      'Ask for more than 0 A, or leave the load out.',
    );
  }
}

function recommendationOf(profiles: readonly ModuleProfile[]): Recommendation {
  const { form } = stacked(profiles);
  const { by, limit: current } = worstOf(form, profiles, undefined);
  const weakest = profiles.find(({ name }) => name === by);
  return { current, setBy: weakest === undefined ? by : `${by}: ${weakest.recommended.why}` };
}

function weakestOf(
  profiles: readonly ModuleProfile[],
  { place, probability }: ReturnType<typeof leastOf>,
): SeriesBuild['weakest'] {
  const sure = probability >= surely;
  const weakest = profiles[place];
  if (weakest === undefined) throw new RangeError(`no module at place ${place}`);
  return { module: weakest.name, sure, then: pastTheLimit(weakest, sure) };
}

/** Σ (V − I·R) on the regulated lines. */
function voltageAt(profiles: readonly ModuleProfile[], current: Amperes): Estimate {
  return addedUp(
    profiles.flatMap(({ openCircuit, droop }) => [
      { taken: openCircuit, times: 1 },
      { taken: droop, times: -current },
    ]),
  );
}

/**
 * The same where more may be asked than all can give: modules that don't hold the load count nothing, and once
 * that is not certain any more the voltage may be anything down to 0.
 */
function voltageUnder(
  profiles: readonly ModuleProfile[],
  { load, usable }: { readonly load: Amperes; readonly usable: Estimate },
): Estimate {
  const all = voltageAt(profiles, load);
  if (load <= usable.low) return all;
  const holding = profiles.filter((profile) => profile.usable.value >= load);
  const value = Math.max(0, voltageAt(holding, load).value);
  return { value, low: 0, high: Math.max(value, all.high) };
}

/** Voltage over current, from no load to where the weakest gives way. */
function curveOf(profiles: readonly ModuleProfile[], end: Amperes): SeriesBuild['curve'] {
  const currents = Array.from({ length: curvePoints }, (_, index) => (end * index) / (curvePoints - 1));
  const voltages = currents.map((current) => voltageAt(profiles, current));
  return {
    currents,
    voltage: {
      best: voltages.map(({ value }) => value),
      low: voltages.map(({ low }) => low),
      high: voltages.map(({ high }) => high),
    },
  };
}

function stacked(profiles: readonly ModuleProfile[]): Circuit {
  return {
    form: { kind: 'stack', of: profiles.map(({ name }) => ({ kind: 'module', name })) },
    ballast: undefined,
    reverseDiodes: true,
    orDiodes: false,
  };
}
