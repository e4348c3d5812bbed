import type { Driver, Message } from '../files/driver.js';
import type { Seconds } from '../quantity/quantity.js';
import { pauses, type Need, type OperationNeed, type RoundTrip } from './trial-pace.js';

/** How fast an instrument turned out to be. */
export interface Pace {
  readonly roundTrips: readonly RoundTrip[];
  readonly afterAnswer: Need;
  readonly afterOperations: readonly OperationNeed[];
}

/** What a driver file had better say; what it says already where that will do. */
export interface Proposal {
  readonly gap: Seconds;
  readonly timeout: Seconds;
  readonly settling: Seconds;
  /** After the last message of an operation, where it needs more than the gap. */
  readonly rests: Readonly<Record<string, Seconds>>;
}

/** An answer may take so many times as long as the slowest that was seen. */
const patience = 5;

/**
 * What follows from how fast an instrument was. Nothing becomes shorter than the file has it: that may stand in a
 * manual, and what was seen is one instrument on one day.
 *
 * - `timeout`: at least five times the slowest answer, rounded up to 1, 2 or 5 and zeros.
 * - `gap`: what is needed after an answer, or what half of the operations need, whichever is more; then one step
 *   of 0, 5, 10, 20, 50 ms … longer than the shortest pause that was long enough. None where nothing was missed
 *   without one.
 * - `rests`: an operation that needs more than the gap is followed by a rest of its own, by the same rule.
 * - `settling`: at least as long as an answer was late after an operation, rounded up to 1, 2 or 5: the instrument
 *   is not done before. What a change of current needs cannot be seen with the input off.
 */
export function proposalFor({ wire, settling, operations }: Driver, pace: Pace): Proposal {
  const { roundTrips, afterAnswer, afterOperations } = pace;
  const lates = afterOperations.map(({ late }) => late);
  const slowest = Math.max(0, ...roundTrips.flatMap(({ times }) => times));
  const needs = afterOperations.map(needOf);
  const gap = Math.max(wire.gap, oneStepMore(Math.max(needOf(afterAnswer), upperMedian(needs))));
  const rests = afterOperations.flatMap((each): [string, Seconds][] => {
    const given = operations[each.operation]?.at(-1)?.rest ?? 0;
    const rest = Math.max(given, oneStepMore(needOf(each)));
    return needOf(each) > gap && rest > given ? [[each.operation, rest]] : [];
  });
  return {
    gap,
    timeout: Math.max(wire.timeout, roundedUp(patience * Math.max(slowest, ...lates))),
    settling: Math.max(settling, roundedUp(Math.max(0, ...lates))),
    rests: Object.fromEntries(rests),
  };
}

/** A driver whose operations end in these rests. */
export function withRests(driver: Driver, rests: Proposal['rests']): Driver {
  const operations = Object.entries(driver.operations).map(
    ([operation, messages]): [string, readonly Message[]] => {
      const rest = rests[operation];
      const last = messages.length - 1;
      return [
        operation,
        rest === undefined ? messages : messages.map((each, at) => (at === last ? { ...each, rest } : each)),
      ];
    },
  );
  return { ...driver, operations: Object.fromEntries(operations) };
}

/** The next of 1, 2 or 5 and zeros, in milliseconds; 0 stays 0. */
export function roundedUp(time: Seconds): Seconds {
  if (time <= 0) return 0;
  const milliseconds = Math.max(1, time * 1000 * (1 - 1e-9));
  const decade = 10 ** Math.floor(Math.log10(milliseconds));
  const step = [1, 2, 5, 10].find((each) => each * decade >= milliseconds) ?? 10;
  return (step * decade) / 1000;
}

function oneStepMore(pause: Seconds): Seconds {
  return pause === 0 ? 0 : (pauses.find((each) => each > pause) ?? 2 * pause);
}

/** Where no pause was long enough, nothing is proposed: something else is the matter. */
function needOf({ pause }: Need): Seconds {
  return pause ?? 0;
}

/** At least half of them are no larger. */
function upperMedian(needs: readonly Seconds[]): Seconds {
  const sorted = [...needs].sort((one, other) => one - other);
  return sorted[Math.ceil(sorted.length / 2) - 1] ?? 0;
}
