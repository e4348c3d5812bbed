import type { Seconds } from '../quantity/quantity.js';
import type { PointEvidence } from './point-evidence.js';
import { PointTable } from './point-table.js';
import { pooled } from './pooled-points.js';

/**
 * Of a long row of looks at the same those of the last hour are kept as they are, over which a soak is watched for
 * settling at most, at a look every second at most: its end is judged by what was seen.
 */
const newest = { for: 3600 as Seconds, most: 4096 } as const;
/** And of the older ones so many groups. Chosen: twelve hours of a soak at the usual look every ten seconds. */
export const mostGroups = 4096;
/** So many looks pass from the newest to the groups at once. */
const atOnce = 512;

/**
 * The points of one step, in their order. A soak of weeks, or an idle module that is watched for a day, looks at the
 * same a million times: beyond some thousand looks the older ones are pooled, in groups of neighbours that are twice
 * as large each time there are too many of them. So memory is bounded, however long such a row; one that is no
 * longer than this is kept as it is, and so is the first look of any.
 */
export class KeptPoints {
  readonly #table = new PointTable();
  /** Where the row that goes on now has its first look; after it come its groups, and then its newest looks. */
  #first = 0;
  #groupsEnd = 0;
  #each = 1;
  #most = mostGroups;

  add(point: PointEvidence): void {
    const table = this.#table;
    const goesOn = this.#first < table.length && lookedAtTheSame(table.at(this.#first), point);
    table.add(point);
    if (!goesOn) {
      this.#first = table.length - 1;
      this.#groupsEnd = table.length;
      this.#each = 1;
      this.#most = mostGroups;
    } else if (this.#isTooOld(this.#groupsEnd + atOnce - 1, point.t)) this.#groupOlder();
  }

  all(): readonly PointEvidence[] {
    return Array.from({ length: this.#table.length }, (_, index) => this.#table.at(index));
  }

  #isTooOld(index: number, now: Seconds): boolean {
    const { length } = this.#table;
    return index < length && (length - index > newest.most || now - this.#table.at(index).t > newest.for);
  }

  #groupOlder(): void {
    this.#regroup(this.#groupsEnd + atOnce);
    if (this.#groupsEnd - this.#first - 1 <= this.#most) return;
    this.#each *= 2;
    this.#regroup(this.#groupsEnd);
    // What ends now this way and now that can't be pooled: then trying again soon would gain nothing.
    this.#most = Math.max(mostGroups, 2 * (this.#groupsEnd - this.#first - 1));
  }

  /** Pools what lies before `older`, as far as groups have room, and moves the rest up. */
  #regroup(older: number): void {
    const table = this.#table;
    let end = this.#first + 1;
    for (let index = end; index < older; index += 1) {
      const [last, next] = [table.at(end - 1), table.at(index)];
      const fits = end - 1 > this.#first && last.looks + next.looks <= this.#each;
      if (fits && last.outcome === next.outcome) table.put(end - 1, pooled(last, next));
      else {
        table.move(index, end);
        end += 1;
      }
    }
    this.#groupsEnd = end;
    for (let index = older; index < table.length; index += 1, end += 1) table.move(index, end);
    table.cutOffAt(end);
  }
}

/** Whether two points looked at the same: the idle module, or one that is held at a current. */
function lookedAtTheSame(one: PointEvidence, other: PointEvidence): boolean {
  return (
    (one.phase === 'soak' || one.phase === 'idle') &&
    one.phase === other.phase &&
    one.of === other.of &&
    one.set.current === other.set.current &&
    one.set.voltage === other.set.voltage
  );
}
