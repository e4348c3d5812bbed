import type { RunHeader } from '../../record/run-header.js';

type Change = RunHeader['modules'][number]['changes'][number];

/**
 * What was done to modules of one name, by what their files say of it now and said then; a sentence each. When it was
 * done its date tells, and not that the earlier file lacked it: it may have been written down late.
 */
export function doneBetween(one: RunHeader, other: RunHeader): readonly string[] {
  const [then, now] = Date.parse(one.began) > Date.parse(other.began) ? [other, one] : [one, other];
  return now.modules.flatMap(({ name, changes }) => {
    const earlier = then.modules.find((module) => module.name === name)?.changes;
    if (earlier === undefined) return [];
    return [
      ...lackedBy(earlier, changes).map((change) => newlyWritten(name, change, [dayOf(then), dayOf(now)])),
      ...lackedBy(changes, earlier).map(
        (change) => `No longer in the file of ${name}, and it was there before: ${inWords(change)}.`,
      ),
    ];
  });
}

function lackedBy(some: readonly Change[], others: readonly Change[]): readonly Change[] {
  const known = new Set(some.map(inWords));
  return others.filter((change) => !known.has(inWords(change)));
}

/** A day that one of the records was made on may lie on either side of it. */
function newlyWritten(
  name: string,
  change: Change,
  [then, now]: readonly [then: string, now: string],
): string {
  const { date } = change;
  if (date > then && date < now) return `Done to ${name} in between, by its file: ${inWords(change)}.`;
  const written = `Written into the file of ${name} since the earlier record: ${inWords(change)}`;
  if (date < then)
    return `${written}. By that date it was done before the earlier record too, so it tells the two not apart.`;
  if (date > now) return `${written}. That date is after the later record: see that it is right.`;
  const which = date === then ? 'earlier' : 'later';
  return `${written}. That is the day of the ${which} record: whether it was done before that or after, the date does not tell.`;
}

function dayOf({ began }: RunHeader): string {
  return began.slice(0, 10);
}

function inWords({ date, what }: Change): string {
  return `${what} (${date})`;
}
