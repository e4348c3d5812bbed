import { listed } from '../../quantity/listed.js';
import type { RunHeader } from '../../record/run-header.js';

/**
 * Which instruments both records were made with, as far as their names tell it, and what that means for the
 * uncertainty of a difference; a sentence each.
 */
export function instrumentsAlike(then: RunHeader, now: RunHeader): readonly string[] {
  const [earlier, later] = [then, now].map(identities) as [Identities, Identities];
  const inBoth = [...later.keys()].filter((role) => earlier.has(role));
  const same = inBoth.filter((role) => earlier.get(role) === later.get(role));
  const exchanged = inBoth.filter((role) => !same.includes(role));
  return [
    ...exchangedInWords(exchanged),
    ...sameInWords(same),
    ...aloneInWords('earlier', lacking(earlier, later)),
    ...aloneInWords('later', lacking(later, earlier)),
  ];
}

type Identities = ReadonlyMap<string, string>;

function identities({ instruments }: RunHeader): Identities {
  return new Map(instruments.map(({ role, identity }) => [role, identity]));
}

function lacking(one: Identities, other: Identities): readonly string[] {
  return [...one.keys()].filter((role) => !other.has(role));
}

function exchangedInWords(roles: readonly string[]): readonly string[] {
  if (roles.length === 0) return [];
  const [are, their] = roles.length === 1 ? ['is another one', 'Its'] : ['are others', 'Their'];
  return [
    `By the names that they give themselves, the ${listed(roles)} ${are} in the later record. ${their} errors are ` +
      'independent in the two, as the uncertainties of the differences take them.',
  ];
}

function sameInWords(roles: readonly string[]): readonly string[] {
  if (roles.length === 0) return [];
  const [are, their] = roles.length === 1 ? ['is', 'its'] : ['are', 'their'];
  return [
    `By the names that they give themselves, the ${listed(roles)} ${are} the same in both records; nothing else tells. ` +
      `Part of ${their} error is then common to both and falls out of a difference, so where a finding rests on ` +
      'that, the uncertainty given for its difference is rather too wide: the cautious side.',
  ];
}

function aloneInWords(which: 'earlier' | 'later', roles: readonly string[]): readonly string[] {
  if (roles.length === 0) return [];
  return [`Only the ${which} record was made with a ${listed(roles)}.`];
}
