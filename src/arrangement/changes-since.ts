import type { RunHeader } from '../record/run-header.js';
import type { ModuleRecords } from './module-records.js';
import type { UnderstoodRecord } from './understood-record.js';

/** Something that was done to a module, as its file has it. */
export type Change = RunHeader['modules'][number]['changes'][number];

/**
 * What was done to the module after a record of it was made: what any of its records lists, that one does not,
 * dated on its day or later. On its day it can only have come after: else the module's file would have said so
 * by then. Days are those of the file, a record's that of UTC.
 */
export function changesSince(record: UnderstoodRecord, module: ModuleRecords): readonly Change[] {
  const day = record.header.began.slice(0, 10);
  const known = new Set(changesIn(record, module.name).map(nameOf));
  const all = [...module.alone, ...module.together].flatMap((other) => changesIn(other, module.name));
  const since = all.filter((change) => change.date >= day && !known.has(nameOf(change)));
  return since.filter((change, index) => since.findIndex((one) => nameOf(one) === nameOf(change)) === index);
}

/** Those since which the fewest changes were made: what was measured before a change counts only where nothing was after it. */
export function leastChangedSince<Of extends { readonly record: UnderstoodRecord }>(
  heard: readonly Of[],
  module: ModuleRecords,
): readonly Of[] {
  const counts = heard.map(({ record }) => changesSince(record, module).length);
  const fewest = Math.min(...counts);
  return heard.filter((_, index) => counts[index] === fewest);
}

function changesIn({ header }: UnderstoodRecord, name: string): readonly Change[] {
  return header.modules.find((module) => module.name === name)?.changes ?? [];
}

function nameOf({ date, what }: Change): string {
  return `${date} ${what}`;
}
