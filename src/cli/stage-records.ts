import { UnfitRecordsError, type UnfitModule } from '../arrangement/arrangement-error.js';
import type { UnderstoodRecord } from '../arrangement/understood-record.js';
import type { StagesModule } from '../files/stages.js';
import { listed } from '../quantity/listed.js';
import { readRecords } from './read-records.js';

/**
 * The records of all modules of a stages file, in its order.
 * @throws NoRecordError, BadRecordError
 * @throws UnfitRecordsError where a record is of another module than the file says
 */
export function recordsOf(modules: readonly StagesModule[]): readonly UnderstoodRecord[] {
  const named = modules.map(({ name, records }) => ({ name, records: readRecords(records) }));
  const unfit = named.flatMap(({ name, records }) => records.flatMap((record) => ofAnother(name, record)));
  if (unfit.length > 0) throw new UnfitRecordsError(unfit);
  return named.flatMap(({ records }) => records);
}

function ofAnother(name: string, { run, header }: UnderstoodRecord): readonly UnfitModule[] {
  const names = header.modules.map((module) => module.name);
  if (names.length === 1 && names[0] === name) return [];
  return [
    {
      module: name,
      why: `${run} is a record of ${listed(names)}`,
      advice: 'name under each module the records of that module alone',
    },
  ];
}
