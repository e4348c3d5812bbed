import { modulesOf } from './build.js';
import { dissipationMap, guaranteedOver } from './guaranteed.js';
import { layOut } from './laid-out.js';
import type { ModuleProfile } from './module-profile.js';
import type { StagedBuild } from './staged-build.js';
import { stagesCautions } from './stages-cautions.js';
import { standingsOf } from './stages-hanging.js';
import { stagesParts } from './stages-parts.js';
import { dissipationOf, requireRecords, requireStages } from './stages-sense.js';
import { stagesStanding } from './stages-standing.js';
import type { StagesWish } from './stages-wish.js';
import { switchOversOf } from './switch-overs.js';
import type { Switching } from './switching.js';

/**
 * A supply whose modules are joined otherwise as its output rises, so that the linear stage behind them stays
 * cool, worked out: what each arrangement gives, where it is switched over and through what the contacts pass on
 * the way, and which current is guaranteed at each output. Of one that may not be built, or of which that can't be
 * told, everything is given but the parts to buy. V, A, W.
 *
 * All that is guaranteed holds in the worst case: where voltage is short it is taken at the lowest that the
 * records allow, where it makes heat at the highest.
 * @param all profiles of the modules of the arrangements, in any order; others are left out.
 * @throws UnfitWishError for a wish that can't be worked out: no arrangement, contacts that don't make what an
 * arrangement says, a hysteresis that leaves no room, more moving contacts than can be looked at.
 * @throws UnfitRecordsError for modules without a profile.
 */
export function buildStages(all: readonly ModuleProfile[], wish: StagesWish): StagedBuild {
  requireStages(wish);
  requireRecords(all, wish);
  const used = new Set(wish.arrangements.flatMap(({ form }) => modulesOf(form)));
  const profiles = all.filter(({ name }) => used.has(name));
  const switching: Switching = {
    contacts: wish.contacts,
    wires: wish.wires,
    diodes: wish.diodes,
    sources: profiles.map(({ name, label, openCircuit }) => ({
      name,
      label: label.voltage,
      open: openCircuit.value,
    })),
    bonded: profiles.flatMap(({ name, earth }) => (earth?.relation === 'bonded' ? [name] : [])),
  };
  const laid = layOut(profiles, wish, switching);
  const switchOvers = switchOversOf(laid, wish, switching);
  const standings = standingsOf(profiles, switching, laid);
  const found = { wish, switching, laid, switchOvers, standings };
  const mostDissipation = dissipationOf(wish.linearStage);
  const staged = { ...found, mostDissipation };
  const guaranteed = guaranteedOver(staged);
  const { standing, concerns } = stagesStanding(profiles, found);
  return {
    kind: 'stages',
    wish,
    modules: profiles,
    standing,
    concerns,
    arrangements: laid.map((each) => each.found),
    switchOvers,
    mostDissipation,
    guaranteed,
    map: dissipationMap(staged, guaranteed),
    parts: standing.kind === 'may-be-built' ? stagesParts(profiles, found, mostDissipation) : [],
    cautions: stagesCautions(found),
  };
}
