import { amps, givenPercent } from '../analysis/in-words.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import { listed } from '../quantity/listed.js';
import type { Concern } from './build.js';
import { changesSince } from './changes-since.js';
import type { ModuleProfile, Taken } from './module-profile.js';
import { earthHeardOf, heardOf, type ModuleRecords, newestOfEach, sourceOf } from './module-records.js';
import { shortened } from './shortened.js';
import { wasWarmed } from './recommended.js';
import type { RecordSource, UnderstoodRecord } from './understood-record.js';
import { type Use, usesOf } from './uses.js';

/** A supply is set to within a few per cent of its label. Common practice, no published source. */
const mostOffLabel = 0.1;

type Profile = Omit<ModuleProfile, 'concerns'>;
type Told = Pick<Concern, 'kind' | 'text'> & Partial<Pick<Concern, 'run' | 'weight'>>;

/** Capacitors age, and calibrations run out, in about that time. Common practice, no published source. */
const oldAfterDays = 365;
/** Clocks that are right may be apart by as much: one may have been set to the time of another place. */
const clocksDifferDays = 1;
/** Of modules whose limits are known no better than this, nobody can say which is the weaker. Chosen, no published source. */
const coarseLimit = 0.05;

/** What weakens or hinders whatever is built on a module, by the records that its numbers were taken from. */
export function concernsOf(module: ModuleRecords, profile: Profile, today: Date): readonly Concern[] {
  const uses = usesOf(profile);
  const told: readonly Told[] = [
    ...uses.flatMap(brokenOff),
    ...inVain(module, uses),
    ...earthsDisagree(module),
    ...offLabel(profile),
    ...uses.flatMap((use) => changed(module, use)),
    ...uses.flatMap((use) => old(use, today)),
    ...uses.flatMap((use) => datedAhead(module, use, today)),
    ...limitUnknown(profile.usable),
    ...coarse(profile),
    ...(profile.limitStyle === undefined ? [styleUnknown] : []),
    ...(wasWarmed(module) ? [] : [notWarmed]),
    ...notAccepted(module),
    ...describedOtherwise(module),
    ...(uses.some(({ from }) => from.simulated) ? [simulated] : []),
  ];
  return told.map(({ kind, text, run, weight = 'weakens' }) => ({
    kind,
    module: module.name,
    run,
    weight,
    text,
  }));
}

function brokenOff({ from, decides }: Use): readonly Told[] {
  if (from.state === 'whole') return [];
  const how = from.state === 'stopped' ? 'was stopped before its end' : 'breaks off without an end';
  return [
    {
      kind: 'cut-off',
      run: from.run,
      weight: decides ? 'hinders' : 'weakens',
      text: `its ${dated(from)} ${how}, and nobody knows what the rest would have shown: run it again`,
    },
  ];
}

/**
 * A newer record that gave nothing to build on must not be forgotten for an older one that did: the module may have
 * failed in it. So may one that was stopped, whatever it was for.
 */
function inVain(module: ModuleRecords, uses: readonly Use[]): readonly Told[] {
  const isUsed = ({ run }: UnderstoodRecord): boolean => uses.some(({ from }) => from.run === run);
  const isLater = ({ header }: UnderstoodRecord): boolean =>
    uses.some(
      ({ from, decides }) =>
        decides &&
        from.procedure === header.procedure.name &&
        Date.parse(from.began) < Date.parse(header.began),
    );
  return newestOfEach(module.alone.map((record) => ({ record }))).flatMap(({ record }): readonly Told[] => {
    if (isUsed(record)) return [];
    const from = sourceOf(record);
    if (from.state !== 'whole') return brokenOff({ from, decides: true, mustBeFresh: false });
    return isLater(record)
      ? [
          {
            kind: 'not-accepted',
            run: record.run,
            weight: 'hinders',
            text: `its ${dated(from)} came to no result, though an older one did: find out why, and run it again`,
          },
        ]
      : [];
  });
}

/** A bond to earth does not come or go by itself. */
function earthsDisagree(module: ModuleRecords): readonly Told[] {
  const now = earthHeardOf(module).filter(
    ({ record, finding }) => finding.value !== 'undetermined' && changesSince(record, module).length === 0,
  );
  const newest = now.at(-1);
  const other = now.findLast(({ finding }) => finding.value !== newest?.finding.value);
  if (newest === undefined || other === undefined) return [];
  const said = ({ record, finding }: typeof newest): string =>
    `${String(finding.value)} by its ${dated(sourceOf(record))}`;
  return [
    {
      kind: 'described-otherwise',
      run: newest.record.run,
      weight: newest.finding.value === 'isolated' ? 'hinders' : 'weakens',
      text: `its output is ${said(newest)} and ${said(other)}, and no change in between is known: write what was changed into its module file and run isolation again, or leave out the record that is wrong`,
    },
  ];
}

function offLabel({ openCircuit, label }: Profile): readonly Told[] {
  const off = openCircuit.value / label.voltage - 1;
  if (Math.abs(off) <= mostOffLabel) return [];
  const given = `with no load it gives ${formatQuantity(openCircuit.value, 'voltage', { significant: 3 })}, and its label says ${formatQuantity(label.voltage, 'voltage')}`;
  const { run } = openCircuit.from;
  return [
    off < 0
      ? {
          kind: 'not-accepted',
          run,
          weight: 'hinders',
          text: `${given}: it has failed, or it is another module; find out before it is used`,
        }
      : {
          kind: 'not-accepted',
          run,
          text: `${given}: see that it regulates, and that what it feeds bears that`,
        },
  ];
}

function changed(module: ModuleRecords, { from, mustBeFresh }: Use): readonly Told[] {
  const record = [...module.alone, ...module.together].find(({ run }) => run === from.run);
  const changes = record === undefined ? [] : changesSince(record, module);
  if (changes.length === 0) return [];
  const what = changes.map((change) => `${shortened(change.what)}, ${change.date}`).join('; ');
  return [
    {
      kind: 'changed-since',
      run: from.run,
      weight: mustBeFresh ? 'hinders' : 'weakens',
      text: `it was changed after its ${dated(from)} (${what}): run ${from.procedure} again`,
    },
  ];
}

function old({ from }: Use, today: Date): readonly Told[] {
  const days = (today.getTime() - Date.parse(from.began)) / 86_400_000;
  if (!(days > oldAfterDays)) return [];
  return [{ kind: 'old', run: from.run, text: `its ${dated(from)} is more than a year old: run it again` }];
}

/**
 * Its age can't be told. Where it stands against another of its procedure, or against a change, it counts as the
 * newest for ever, whatever was found since.
 */
function datedAhead(module: ModuleRecords, { from }: Use, today: Date): readonly Told[] {
  const days = (Date.parse(from.began) - today.getTime()) / 86_400_000;
  if (!(days > clocksDifferDays)) return [];
  const records = [...module.alone, ...module.together];
  const others = records.filter(
    ({ run, header }) => run !== from.run && header.procedure.name === from.procedure,
  );
  const wasChanged = records.some(({ header }) =>
    header.modules.some(({ name, changes }) => name === module.name && changes.length > 0),
  );
  const hides = others.length > 0 || wasChanged;
  return [
    {
      kind: 'dated-ahead',
      run: from.run,
      weight: hides ? 'hinders' : 'weakens',
      text: `its ${dated(from)} lies in the future, so a clock was wrong and nobody knows ${hides ? 'what came after it' : 'how old it is'}: set the clocks, and run it again`,
    },
  ];
}

function limitUnknown({ bound, value, from }: Taken): readonly Told[] {
  if (bound === undefined) return [];
  return [
    {
      kind: 'limit-unknown',
      run: from.run,
      text: `its ${dated(from)} met no limit up to ${amps(value)}, so where it gives way is not known: run real-limit on it`,
    },
  ];
}

function coarse({ usable, droop }: Profile): readonly Told[] {
  const limit = halfWidth(usable);
  const slope = halfWidth(droop);
  return [
    ...(limit > coarseLimit * usable.value
      ? [
          {
            kind: 'coarse' as const,
            run: usable.from.run,
            text: `its usable current is known to ± ${amps(limit)} only, more than ${givenPercent(coarseLimit)} of it: measure it with a finer search or a better load`,
          },
        ]
      : []),
    ...(slope > droop.value
      ? [
          {
            kind: 'coarse' as const,
            run: droop.from.run,
            text: `its droop can't be told from none, known to ± ${formatQuantity(slope, 'resistance', { significant: 2 })} only: measure it with more points or a better meter`,
          },
        ]
      : []),
  ];
}

function halfWidth({ interval: [low, high] }: Taken): number {
  return (high - low) / 2;
}

const styleUnknown: Told = {
  kind: 'style-unknown',
  text: 'what it does past its limit is not known: run limit-shape on it',
};

const notWarmed: Told = {
  kind: 'not-warmed',
  text: 'it was measured cold, and limits come down as modules warm: run thermal-soak on it',
};

const simulated: Told = {
  kind: 'simulated',
  text: 'it was measured on a simulated bench, for practice only: measure the real one before anything is built',
};

/**
 * What a later record found again, whatever it found, is not held against it any more. What it can't give in current
 * is in its numbers, and what is built is made for those; a voltage, a warmth or an answer that was required for
 * safety is in none of them, and refuses it.
 */
function notAccepted(module: ModuleRecords): readonly Told[] {
  return newestOfEach(module.alone.map((record) => ({ record }))).flatMap(({ record }) => {
    const unmet = record.unmet.filter(({ finding }) => {
      const heard = finding === 'earth-relation' ? earthHeardOf(module) : heardOf(module, finding);
      return heard.at(-1)?.record === record;
    });
    if (unmet.length === 0) return [];
    const required = unmet.map(({ finding, requirement }) => `${finding} ${requirement}`);
    return [
      {
        kind: 'not-accepted' as const,
        run: record.run,
        weight: unmet.some((one) => bearsOnSafety(module, one.finding))
          ? ('hinders' as const)
          : ('weakens' as const),
        text: `it did not conform in its ${dated(sourceOf(record))} (required: ${listed(required)}): see that it is good enough for this`,
      },
    ];
  });
}

/**
 * One that is bonded to earth is what many are made to be, and whoever stacks it is refused by where it stands; one
 * that leaks is what none is made to be.
 */
function bearsOnSafety(module: ModuleRecords, finding: string): boolean {
  if (finding === 'earth-relation' || finding === 'earth-resistance')
    return earthHeardOf(module).at(-1)?.finding.value !== 'bonded';
  return (
    finding === 'open-circuit-voltage' || finding === 'temperature-rise' || finding.startsWith('answer-of-')
  );
}

function describedOtherwise({ alone }: ModuleRecords): readonly Told[] {
  const words = [...new Set(alone.flatMap(({ header }) => header.modules.map((one) => one.description)))];
  if (words.length < 2) return [];
  const quoted = words.map((one) => `"${shortened(one)}"`);
  return [
    {
      kind: 'described-otherwise',
      text: `its records call it ${listed(quoted)}: see that they are of one and the same module`,
    },
  ];
}

/** `isolation of 2026-11-30`. */
function dated({ procedure, began }: RecordSource): string {
  return `${procedure} of ${began.slice(0, 10)}`;
}
