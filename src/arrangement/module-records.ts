import { type Finding, findingNamed } from '../analysis/finding.js';
import type { RunHeader } from '../record/run-header.js';
import type { UnfitModule } from './arrangement-error.js';
import type { RecordSource, UnderstoodRecord } from './understood-record.js';

/** All records of one module. */
export interface ModuleRecords {
  readonly name: string;
  /** As the newest record of it alone has it. */
  readonly described: RunHeader['modules'][number];
  /** Of it alone, oldest first; one at least. */
  readonly alone: readonly UnderstoodRecord[];
  /** Of a group or stack that it was in, where those tell how its output stands to earth; oldest first. */
  readonly together: readonly UnderstoodRecord[];
}

/** A finding and the record that it stands in. */
export interface Heard {
  readonly record: UnderstoodRecord;
  readonly finding: Finding;
}

/**
 * Groups records by their module, the modules in the order in which they first appear. Records of a group or a
 * stack hold nothing that is one module's own, except how each stands to earth, which was measured one by one.
 * One that adds nothing to any module named here is unfit. A record that was given twice counts once.
 */
export function byModule(records: readonly UnderstoodRecord[]): {
  readonly modules: readonly ModuleRecords[];
  readonly unfit: readonly UnfitModule[];
} {
  const once = records.filter(
    (record, index) => records.findIndex((other) => isSame(record, other)) === index,
  );
  const oldestFirst = once.toSorted((one, other) => began(one) - began(other));
  const alone = oldestFirst.filter(isOfOne);
  const together = oldestFirst.filter((record) => !isOfOne(record));
  const names = [...new Set(once.filter(isOfOne).flatMap(namesIn))];
  const modules = names.flatMap((name) => {
    const own = alone.filter(({ header }) => header.modules[0]?.name === name);
    const described = own.at(-1)?.header.modules[0];
    const others = together.filter((record) => earthOf(record, name) !== undefined);
    return described === undefined ? [] : [{ name, described, alone: own, together: others }];
  });
  return {
    modules,
    unfit: together
      .filter((record) => !names.some((name) => earthOf(record, name) !== undefined))
      .map(unfitGroup),
  };
}

/** What a module's records say under one name, oldest first. */
export function heardOf({ alone }: ModuleRecords, name: string): readonly Heard[] {
  return alone.flatMap((record) => {
    const finding = findingNamed(record.findings, name);
    return finding === undefined ? [] : [{ record, finding }];
  });
}

/** What they say of its earth, those of groups and stacks included, oldest first. */
export function earthHeardOf(module: ModuleRecords): readonly Heard[] {
  const together = module.together.flatMap((record) => {
    const finding = earthOf(record, module.name);
    return finding === undefined ? [] : [{ record, finding }];
  });
  return [...heardOf(module, 'earth-relation'), ...together].toSorted(
    (one, other) => began(one.record) - began(other.record),
  );
}

/** Of each procedure the newest only: it was run again because the older ones no longer count. Newest first. */
export function newestOfEach<Of extends { readonly record: UnderstoodRecord }>(
  heard: readonly Of[],
): readonly Of[] {
  const newestFirst = heard.toReversed();
  const procedures = newestFirst.map(({ record }) => record.header.procedure.name);
  return newestFirst.filter((_, index) => procedures.indexOf(procedures[index] ?? '') === index);
}

export function sourceOf({ run, header, state }: UnderstoodRecord): RecordSource {
  return {
    run,
    procedure: header.procedure.name,
    began: header.began,
    // Damaged records never come so far; what is left of one would be no more than this.
    state: state === 'damaged' ? 'cut-off' : state,
    simulated: header.bench.simulated,
  };
}

function earthOf({ findings }: UnderstoodRecord, name: string): Finding | undefined {
  return findingNamed(findings, `earth-relation-of-${name}`);
}

function namesIn({ header }: UnderstoodRecord): readonly string[] {
  return header.modules.map(({ name }) => name);
}

function isOfOne({ header }: UnderstoodRecord): boolean {
  return header.circuit === 'single' && header.modules.length === 1;
}

function isSame(one: UnderstoodRecord, other: UnderstoodRecord): boolean {
  return one.run === other.run && one.header.began === other.header.began;
}

function began({ header }: UnderstoodRecord): number {
  return Date.parse(header.began);
}

function unfitGroup(record: UnderstoodRecord): UnfitModule {
  const { run, header } = record;
  const names = namesIn(record);
  const what = header.circuit === 'series' ? 'stack' : 'group';
  return {
    module: names.join('+'),
    why: `${run} is of the ${what} ${names.join('+')}; records of one module each are needed`,
    advice: 'run real-limit on each module alone, and give those records',
  };
}
