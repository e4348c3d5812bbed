import { leastChangedSince } from './changes-since.js';
import { heardOf, type ModuleRecords, newestOfEach } from './module-records.js';
import type { Taken } from './module-profile.js';
import { notBelowZero, takenFrom } from './taken.js';
import type { UnderstoodRecord } from './understood-record.js';

/** What a module's line on a load consists of; all of one record, so that they belong to each other. */
export interface LineFound {
  readonly record: UnderstoodRecord;
  readonly openCircuit: Taken;
  readonly droop: Taken;
  readonly usable: Taken;
}

/** Without these nothing can be built. */
export const needed = ['open-circuit-voltage', 'droop-resistance', 'usable-current'] as const;

/** The lines that a module's records offer: of each procedure the newest, none from before a change that a later one is after. */
export function linesOf(module: ModuleRecords): readonly LineFound[] {
  const lines = heardOf(module, 'droop-resistance').flatMap((droop) => {
    const [openCircuit, usable] = (['open-circuit-voltage', 'usable-current'] as const).map((name) =>
      heardOf(module, name).find(({ record }) => record === droop.record),
    );
    return lineOf(droop.record, [openCircuit, droop, usable].map(takenOrNothing));
  });
  return newestOfEach(leastChangedSince(lines, module));
}

/**
 * Of each module's lines the one to build on, so that they compare: one whose limit was met before one whose
 * limit was not, then by the procedure that most modules were measured by, then the newest. Undefined for a
 * module that has none.
 */
export function comparableLines(
  offered: readonly (readonly LineFound[])[],
): readonly (LineFound | undefined)[] {
  const every = offered.flat();
  const times = (line: LineFound): number =>
    every.filter((other) => procedureOf(other) === procedureOf(line) && isBound(other) === isBound(line))
      .length;
  return offered.map((lines) =>
    lines
      .toSorted((one, other) => Number(isBound(one)) - Number(isBound(other)) || times(other) - times(one))
      .at(0),
  );
}

function lineOf(
  record: UnderstoodRecord,
  [openCircuit, droop, usable]: readonly (Taken | undefined)[],
): readonly LineFound[] {
  if (openCircuit === undefined || droop === undefined || usable === undefined) return [];
  return [{ record, openCircuit, droop: notBelowZero(droop), usable: notBelowZero(usable) }];
}

function takenOrNothing(heard: Parameters<typeof takenFrom>[0] | undefined): Taken | undefined {
  return heard === undefined ? undefined : takenFrom(heard);
}

function procedureOf({ record }: LineFound): string {
  return record.header.procedure.name;
}

function isBound({ usable }: LineFound): boolean {
  return usable.bound === 'least';
}
