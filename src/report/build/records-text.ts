import type { Concern } from '../../arrangement/build.js';
import type { ModuleProfile, Taken } from '../../arrangement/module-profile.js';
import type { RecordSource } from '../../arrangement/understood-record.js';
import { formatInterval } from '../../quantity/format-quantity.js';
import { listed } from '../../quantity/listed.js';
import type { Dimension } from '../../quantity/quantity.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { alignTable } from '../align.js';
import { inMinutes } from '../in-minutes.js';
import type { Style } from '../style.js';
import type { AnyBuild } from './any-build.js';
import { prose, section, sentence } from './prose.js';

/**
 * What must be known of the records before anything is built on them; what nothing can be decided on first. What
 * the answer has said already is not said twice, and what holds for several modules once.
 */
export function concernsText({ concerns, standing }: AnyBuild, style: Style): string {
  const said = standing.kind === 'may-be-built' ? [] : standing.because;
  const alike = new Map<string, Concern[]>();
  for (const concern of concerns) {
    if (said.some((because) => because.includes(concern.text))) continue;
    const key = `${concern.weight} ${concern.text}`;
    alike.set(key, [...(alike.get(key) ?? []), concern]);
  }
  const hinders = (group: readonly Concern[]): boolean => group[0]?.weight === 'hinders';
  const groups = [...alike.values()];
  const lines = [...groups.filter(hinders), ...groups.filter((group) => !hinders(group))].map((group) => {
    const line = prose(sentence(concernInWords(group)), '- ');
    return hinders(group) ? style.warn(line) : line;
  });
  return section('About the records', lines, style);
}

function concernInWords(group: readonly Concern[]): string {
  const [first] = group;
  if (first === undefined) return '';
  const names = [...new Set(group.map(({ module }) => module))];
  const who = names.length === 1 ? names.join('') : `Each of ${listed(names)}`;
  return first.text.startsWith(first.module) && names.length === 1 ? first.text : `${who}: ${first.text}`;
}

/** Every number that was taken over, and the record that it was taken from. */
export function sourcesText(modules: readonly ModuleProfile[], style: Style): string {
  return section(
    'Where the numbers come from',
    modules.flatMap(ofModule),
    style,
    'value and its 95 % limits',
  );
}

/** A number or a word of a module, as a row shows it. */
interface Row {
  readonly from: RecordSource;
  readonly cells: readonly [name: string, value: string, range: string];
  readonly note?: string;
}

function ofModule(module: ModuleProfile): string[] {
  const rows = rowsOf(module);
  const lines = alignTable(
    rows.map(({ cells }) => cells),
    ['left', 'left', 'left'],
  ).map((line, index) => withNote(line, rows[index]?.note));
  const runs = new Map(rows.map(({ from }) => [from.run, from]));
  return [...runs.values()].flatMap((from) => [
    prose(sourceInWords(from), `${module.name}: `),
    ...lines.filter((_, index) => rows[index]?.from.run === from.run).map((line) => `  ${line}`),
  ]);
}

function withNote(line: string, note = ''): string {
  return note === '' ? line : `${line}  ${note}`;
}

function sourceInWords({ run, procedure, began, state, simulated }: RecordSource): string {
  return [
    run,
    ...(run.endsWith(procedure) ? [] : [procedure]),
    inMinutes(began),
    ...(simulated ? ['simulated'] : []),
    ...(state === 'stopped' ? ['STOPPED'] : []),
    ...(state === 'cut-off' ? ['CUT OFF'] : []),
  ].join(', ');
}

function rowsOf(module: ModuleProfile): readonly Row[] {
  const { recommended, limitStyle, earth } = module;
  return [
    ...number('no load', module.openCircuit, 'voltage'),
    ...number('droop', module.droop, 'resistance'),
    ...number('usable', module.usable, 'current').map((row) => ({ ...row, note: module.usable.note })),
    {
      from: recommended.from,
      cells: ['recommended', roundedDown(recommended.current, 'current'), recommended.why],
    },
    ...number('drops out', module.dropout, 'current'),
    ...number('into a short', module.shortCircuit, 'current'),
    ...word('past its limit', limitStyle?.word, limitStyle?.from),
    ...word('to earth', earth?.relation, earth?.from),
  ];
}

function number(name: string, taken: Taken | undefined, dimension: Dimension): readonly Row[] {
  if (taken === undefined) return [];
  const { value, interval, bound, from } = taken;
  const { low, high, ...said } = formatInterval(value, interval[0], interval[1], dimension);
  const least = bound === 'least' ? '≥ ' : '';
  const range = low === '' || high === '' ? '' : `${low} to ${high}`;
  return [{ from, cells: [name, `${least}${said.value} ${said.unit}`, range] }];
}

function word(name: string, said: string | undefined, from: RecordSource | undefined): readonly Row[] {
  return said === undefined || from === undefined ? [] : [{ from, cells: [name, said, ''] }];
}
