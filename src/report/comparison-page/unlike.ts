import { listed } from '../../quantity/listed.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import type { RunHeader } from '../../record/run-header.js';
import { plateInWords } from '../record-heading.js';
import type { Result } from '../result.js';

/**
 * What is not alike in two records and bears on how far they can be compared, and what was done to the modules in
 * between; a sentence each.
 */
export function unlikeIn(before: Result, after: Result): readonly string[] {
  const [then, now] = [before.header, after.header];
  return [
    ...sameRecord(before, after),
    ...order(then, now),
    ...plates(then, now),
    ...doneBetween(then, now),
    ...circuits(then, now),
    ...procedures(then, now),
    ...benches(then, now),
    ...air(then, now),
    ...instruments(then, now),
    ...deratings(then, now),
  ];
}

function sameRecord({ fingerprints: one }: Result, { fingerprints: other }: Result): readonly string[] {
  return one.lastSeal !== undefined && one.lastSeal === other.lastSeal
    ? ['Both are one and the same record.']
    : [];
}

function order({ began: then }: RunHeader, { began: now }: RunHeader): readonly string[] {
  return Date.parse(then) > Date.parse(now)
    ? ['The record that was given as the earlier one began after the other.']
    : [];
}

function plates(then: RunHeader, now: RunHeader): readonly string[] {
  const of = ({ modules }: RunHeader): string => modules.map(({ rated }) => plateInWords(rated)).join('; ');
  return of(then) === of(now)
    ? []
    : [
        `The nameplates differ: ${of(then)}, then ${of(now)}. What is given in % of them is of different wholes.`,
      ];
}

/** What stands in the later module's file and not in the earlier one's, of modules of one name. */
function doneBetween(then: RunHeader, now: RunHeader): readonly string[] {
  return now.modules.flatMap(({ name, changes }) => {
    const earlier = then.modules.find((module) => module.name === name);
    if (earlier === undefined) return [];
    const known = new Set(earlier.changes.map(written));
    return changes
      .filter((change) => !known.has(written(change)))
      .map(({ date, what }) => `Done to ${name} in between, by its file: ${what} (${date}).`);
  });
}

function written({ date, what }: RunHeader['modules'][number]['changes'][number]): string {
  return `${date} ${what}`;
}

const wired = { single: 'one module alone', parallel: 'modules in parallel', series: 'modules in series' };

function circuits({ circuit: then }: RunHeader, { circuit: now }: RunHeader): readonly string[] {
  return then === now ? [] : [`The circuits differ: ${wired[then]}, then ${wired[now]}.`];
}

function procedures(then: RunHeader, now: RunHeader): readonly string[] {
  if (then.procedure.name !== now.procedure.name) {
    return [
      `The procedures differ: ${then.procedure.name}, then ${now.procedure.name}. Only what both looked for can be ` +
        'compared, and a finding may rest on other points in each.',
    ];
  }
  const [earlier, later] = [then, now].map((header) => header.steps.map((step) => JSON.stringify(step)));
  const unlike = longer(then.steps, now.steps).flatMap((step, index) =>
    earlier?.[index] === later?.[index] ? [] : [`step ${index + 1}, ${step.kind}`],
  );
  return unlike.length === 0
    ? []
    : [`${then.procedure.name} was not the same both times: other settings in ${listed(unlike)}.`];
}

function longer<T>(one: readonly T[], other: readonly T[]): readonly T[] {
  return one.length < other.length ? other : one;
}

function benches({ bench: then }: RunHeader, { bench: now }: RunHeader): readonly string[] {
  return [
    ...(then.simulated === now.simulated
      ? []
      : ['One of the two was made on a simulated bench: it says nothing of a real module.']),
    ...(then.name === now.name ? [] : [`The benches differ: ${then.name}, then ${now.name}.`]),
    ...(then.voltageFrom === now.voltageFrom
      ? []
      : [
          'The voltage was read at the module in one and at the load in the other: what the leads lose is in one.',
        ]),
    ...(JSON.stringify(then.leads) === JSON.stringify(now.leads) ? [] : ['The leads differ.']),
    ...(JSON.stringify(then.places) === JSON.stringify(now.places) ? [] : ['The ballasts differ.']),
  ];
}

function air(
  { bench: { ambient: then } }: RunHeader,
  { bench: { ambient: now } }: RunHeader,
): readonly string[] {
  if (then === undefined || now === undefined) return [];
  const apart = Math.abs(now.temperature - then.temperature);
  if (apart <= Math.hypot(then.uncertainty, now.uncertainty)) return [];
  const [was, is] = [then, now].map(({ temperature }) => formatQuantity(temperature, 'temperature'));
  return [`The air was at ${was ?? ''}, then at ${is ?? ''}: a warmer module may limit at another current.`];
}

function instruments({ instruments: then }: RunHeader, { instruments: now }: RunHeader): readonly string[] {
  const roles = [...new Set([...then, ...now].map(({ role }) => role))];
  const identityOf = (of: RunHeader['instruments'], role: string): string | undefined =>
    of.find((each) => each.role === role)?.identity;
  const other = roles.filter((role) => identityOf(then, role) !== identityOf(now, role));
  if (other.length === 0) {
    return [
      'Both were made with the same instruments. Part of their error is common to both and falls out of a ' +
        'difference, so the uncertainties given for differences are rather too wide: the cautious side.',
    ];
  }
  return [
    `Other instruments: the ${listed(other)} ${other.length === 1 ? 'is' : 'are'} not the same. Their errors are ` +
      'independent, as the uncertainties of the differences take them.',
  ];
}

function deratings({ derating: then }: RunHeader, { derating: now }: RunHeader): readonly string[] {
  return JSON.stringify(then) === JSON.stringify(now)
    ? []
    : ['The deratings differ: the recommended currents were not worked out alike.'];
}
