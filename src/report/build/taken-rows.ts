import type { ModuleProfile, Taken } from '../../arrangement/module-profile.js';
import type { RecordSource } from '../../arrangement/understood-record.js';
import type { Dimension } from '../../quantity/quantity.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { estimateCells } from './estimate-text.js';

/** A number or a word that was taken over of a module, as it is shown wherever it is. */
export interface TakenRow {
  readonly what: string;
  readonly value: string;
  /** Within which it lies with 95 %; empty where there are none. */
  readonly limits: string;
  /** What the value rests on; empty where the record says all. */
  readonly note: string;
  readonly from: RecordSource;
}

/** All that was taken over of a module, and the records that it was taken from. */
export function takenRows(module: ModuleProfile): readonly TakenRow[] {
  const { recommended, limitStyle, earth } = module;
  return [
    ...number('no load', module.openCircuit, 'voltage'),
    ...number('droop', module.droop, 'resistance'),
    ...number('usable', module.usable, 'current').map((row) => ({ ...row, note: module.usable.note })),
    {
      what: 'recommended',
      value: roundedDown(recommended.current, 'current'),
      limits: '',
      note: recommended.why,
      from: recommended.from,
    },
    ...number('drops out', module.dropout, 'current'),
    ...number('into a short', module.shortCircuit, 'current'),
    ...word('past its limit', limitStyle?.word, limitStyle?.from),
    ...word('to earth', earth?.relation, earth?.from),
  ];
}

function number(what: string, taken: Taken | undefined, dimension: Dimension): readonly TakenRow[] {
  if (taken === undefined) return [];
  const [low, high] = taken.interval;
  const bound = taken.bound === undefined ? {} : { bound: taken.bound };
  const [value, limits] = estimateCells({ value: taken.value, low, high, ...bound }, dimension);
  return [{ what, value, limits, note: '', from: taken.from }];
}

function word(what: string, said: string | undefined, from: RecordSource | undefined): readonly TakenRow[] {
  return said === undefined || from === undefined ? [] : [{ what, value: said, limits: '', note: '', from }];
}
