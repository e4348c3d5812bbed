import { earthRelations } from '../circuit/earth-relation.js';
import { leastChangedSince } from './changes-since.js';
import { concernsOf } from './concerns.js';
import type { LineFound } from './line-record.js';
import type { LimitStyle, ModuleProfile, Taken } from './module-profile.js';
import {
  earthHeardOf,
  type Heard,
  heardOf,
  type ModuleRecords,
  newestOfEach,
  sourceOf,
} from './module-records.js';
import { shortened } from './shortened.js';
import { notBelowZero, takenFrom } from './taken.js';

/**
 * What a module's records say of it, each number by the record that knows it best:
 *
 * - open-circuit voltage and droop by one record, as `comparableLines` chose it;
 * - usable the lowest of the limits that were met, cold or warm, in the newest record of each procedure;
 * - dropout, short-circuit current and limit style by the newest record that could tell;
 * - earth by the newest of all, also where that could not tell: what an older one said may no longer be so.
 */
export function profileOf(
  module: ModuleRecords,
  line: LineFound,
  recommended: ModuleProfile['recommended'],
  today: Date,
): ModuleProfile {
  const { name, described } = module;
  const usable = lowestUsable(module, line);
  const profile = {
    name,
    description: shortened(described.description),
    label: { voltage: described.rated.voltage, current: described.rated.current },
    protectionClass: described.protectionClass,
    input: described.input,
    outputIsolation: described.outputIsolation,
    openCircuit: line.openCircuit,
    droop: line.droop,
    usable,
    recommended: withinUsable(recommended, usable),
    dropout: newestNumber(module, 'dropout-current'),
    shortCircuit: newestNumber(module, 'short-circuit-current'),
    limitStyle: limitStyleOf(module),
    earth: earthOf(module),
  };
  return { ...profile, concerns: concernsOf(module, profile, today) };
}

/** What another record recommended is no more than what is known to be usable now. */
function withinUsable(
  recommended: ModuleProfile['recommended'],
  { interval: [low], from }: Taken,
): ModuleProfile['recommended'] {
  return recommended.current <= low
    ? recommended
    : { current: low, why: 'no more is known to be usable', from };
}

/** One who tried no further does not contradict a limit that was met elsewhere, nor does one who met none when cold. */
function lowestUsable(module: ModuleRecords, line: LineFound): Taken {
  const met = current(module, 'usable-current')
    .filter(({ finding }) => finding.bound === undefined)
    .flatMap((heard) => takenFrom(heard) ?? []);
  return met.reduce(
    (least, one) =>
      least.bound !== undefined || one.interval[0] < least.interval[0] ? notBelowZero(one) : least,
    line.usable,
  );
}

function newestNumber(module: ModuleRecords, finding: string): Taken | undefined {
  return current(module, finding)
    .flatMap((heard) => takenFrom(heard) ?? [])
    .at(0);
}

/** A record that could not tell takes nothing away from one of another procedure that could. */
function limitStyleOf(module: ModuleRecords): ModuleProfile['limitStyle'] {
  return current(module, 'limit-style')
    .flatMap(({ record, finding }) => {
      const word = limitStyles.find((style) => style === finding.value);
      return word === undefined ? [] : [{ word, from: sourceOf(record) }];
    })
    .at(0);
}

const limitStyles: readonly LimitStyle[] = [
  'constant-current',
  'foldback',
  'constant-power',
  'hiccup',
  'latch-off',
];

function earthOf(module: ModuleRecords): ModuleProfile['earth'] {
  const newest = earthHeardOf(module).at(-1);
  if (newest === undefined) return undefined;
  const relation = earthRelations.find((word) => word === newest.finding.value) ?? 'undetermined';
  return { relation, from: sourceOf(newest.record) };
}

/** What speaks for the module as it is now, newest first. */
function current(module: ModuleRecords, finding: string): readonly Heard[] {
  return newestOfEach(leastChangedSince(heardOf(module, finding), module));
}
