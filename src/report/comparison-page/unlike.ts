import { listed } from '../../quantity/listed.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import type { RunHeader } from '../../record/run-header.js';
import { plateInWords } from '../record-heading.js';
import type { Result } from '../result.js';
import { doneBetween } from './done-between.js';
import { instrumentsAlike } from './instruments-alike.js';

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
    ...instrumentsAlike(then, now),
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
  const named = (header: RunHeader): string =>
    header.modules.length === 1
      ? of(header)
      : header.modules.map(({ name, rated }) => `${name} ${plateInWords(rated)}`).join('; ');
  return of(then) === of(now)
    ? []
    : [
        `The nameplates differ. Earlier: ${named(then)}. Later: ${named(now)}. What is given in % of them is of different wholes.`,
      ];
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
    ...(then.name === now.name ? [] : [`The benches differ. Earlier: ${then.name}. Later: ${now.name}.`]),
    ...voltageRead(then, now),
    ...(JSON.stringify(then.leads) === JSON.stringify(now.leads) ? [] : ['The leads differ.']),
    ...(JSON.stringify(then.places) === JSON.stringify(now.places) ? [] : ['The ballasts differ.']),
  ];
}

function voltageRead(then: RunHeader['bench'], now: RunHeader['bench']): readonly string[] {
  if (then.voltageFrom === now.voltageFrom) return [];
  const [atModule, atLoad] =
    then.voltageFrom === 'meter-at-module' ? ['earlier', 'later'] : ['later', 'earlier'];
  return [
    `The voltage was read at the module in the ${atModule} record and at the load in the ${atLoad} one. There what the ` +
      'leads lose was added by calculation, and what their resistance may be wrong by is in the uncertainties of that ' +
      'record only.',
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

function deratings({ derating: then }: RunHeader, { derating: now }: RunHeader): readonly string[] {
  return JSON.stringify(then) === JSON.stringify(now)
    ? []
    : ['The deratings differ: the recommended currents were not worked out alike.'];
}
