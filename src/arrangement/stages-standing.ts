import { volts } from '../analysis/in-words.js';
import type { Concern, Standing } from './build.js';
import { forbiddenIn } from './forbidden-connection.js';
import { highestOutput } from './guaranteed.js';
import { highestOpen, type LaidOut } from './laid-out.js';
import type { ModuleProfile } from './module-profile.js';
import type { Movement, SwitchOver } from './staged-build.js';
import { recommendedForNothing } from './parallel-standing.js';
import { groupStanding } from './stages-groups.js';
import { inputAtRest, type Standings } from './stages-hanging.js';
import { stackStanding } from './stages-stacks.js';
import { type Sequence, sequences, type StagesWish } from './stages-wish.js';
import { standingOf } from './standing-of.js';
import { netlistOf, settledState, type Switching } from './switching.js';

export interface StagesFound {
  readonly wish: StagesWish;
  readonly switching: Switching;
  readonly laid: readonly LaidOut[];
  readonly switchOvers: readonly SwitchOver[];
  readonly standings: readonly Standings[];
}

/**
 * Whether a staged supply may be built. Refused: contacts that pass through a forbidden connection in any order
 * that their sequence allows, or that make one at rest; an output range beyond what the arrangements give; and
 * whatever a string is refused for, of the modules that are ever stacked.
 */
export function stagesStanding(
  profiles: readonly ModuleProfile[],
  found: StagesFound,
): { readonly standing: Standing; readonly concerns: readonly Concern[] } {
  const groups = groupStanding(profiles, found);
  const stacks = stackStanding(profiles, found.laid, found.standings);
  const concerns = [
    ...new Set([...profiles.flatMap((profile) => profile.concerns), ...stacks.concerns, ...groups.concerns]),
  ];
  const said = (kind: Standing['kind']): readonly string[] =>
    stacks.standings.flatMap((standing) =>
      standing.kind === kind && standing.kind !== 'may-be-built' ? standing.because : [],
    );
  const standing = standingOf({
    refusals: [
      ...movementRefusals(found),
      ...restRefusals(found),
      ...restInputRefusals(found),
      ...rangeRefusals(found),
      ...profiles.flatMap(recommendedForNothing),
      ...said('must-not-be-built'),
    ],
    doubts: [...said('cannot-tell'), ...groups.doubts],
    concerns,
  });
  return {
    standing:
      standing.kind === 'may-be-built' ? standing : { ...standing, because: [...new Set(standing.because)] },
    concerns,
  };
}

const inWords: Readonly<Record<Sequence, string>> = {
  'any-order': 'in any order',
  'break-before-make': 'break before make',
  'make-before-break': 'make before break',
};

function movementRefusals({ switchOvers, wish }: StagesFound): readonly string[] {
  return switchOvers.flatMap(({ lower, upper, goingUp, comingDown }) => [
    ...movementRefusal(`${lower} to ${upper}`, goingUp, wish.sequence),
    ...movementRefusal(`${upper} to ${lower}`, comingDown, wish.sequence),
  ]);
}

function movementRefusal(way: string, { bySequence }: Movement, sequence: Sequence): readonly string[] {
  const verdict = bySequence[sequence];
  if (verdict.kind === 'clear') return [];
  const order = verdict.order.join(', then ');
  const clear = sequences.filter((other) => bySequence[other].kind === 'clear');
  const instead =
    clear.length > 0
      ? `Driven ${clear.map((each) => inWords[each]).join(' or ')} no order does that.`
      : 'However they are driven some order does that: wire the contacts otherwise.';
  const driven =
    sequence === 'any-order' ? 'whose contacts may move in any order' : `driven ${inWords[sequence]}`;
  return [`From ${way}, ${driven}: ${order}, and ${verdict.connection.sentence}. ${instead}`];
}

/** Without its supply every relay falls back to rest, whatever was meant. */
function restRefusals({ switching }: StagesFound): readonly string[] {
  const atRest = forbiddenIn(switching, netlistOf(switching, settledState(switching.contacts, [])));
  return atRest === undefined
    ? []
    : [
        `With no contact driven, as when the relays lose their supply, ${atRest.sentence}. Wire it so that nothing is joined wrongly at rest.`,
      ];
}

/** More than the file tells of: nobody will have chosen the linear stage for it. */
function restInputRefusals({ laid, standings }: StagesFound): readonly string[] {
  const highest = highestOpen(laid);
  const atRest = inputAtRest(laid, standings);
  return atRest <= highest + arithmetic
    ? []
    : [
        `With no contact driven, as when the relays lose their supply, the linear stage would stand at up to ${volts(atRest)}, and no arrangement goes beyond ${volts(highest)}. Wire it so that less is joined at rest, or name that as an arrangement, so that it is reckoned with.`,
      ];
}

const arithmetic = 1e-9;

function rangeRefusals({ laid, wish }: StagesFound): readonly string[] {
  const highest = highestOutput(laid, wish.linearStage);
  // Just there nothing is left to flow.
  if (highest > wish.output.to + arithmetic) return [];
  const served =
    highest <= wish.output.from
      ? 'At no output of the range is anything guaranteed'
      : `Above ${volts(highest)} nothing is guaranteed`;
  return [
    `${served}, and the output is to reach ${volts(wish.output.to)}: the highest arrangement may be as low as ${volts(highest + wish.linearStage.dropOut)} with no load, of which the linear stage needs ${volts(wish.linearStage.dropOut)}. Put the range lower, or stack more.`,
  ];
}
