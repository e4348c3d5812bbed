import type { Concern } from '../../arrangement/build.js';
import type { ModuleProfile, Taken } from '../../arrangement/module-profile.js';
import type { RecordSource } from '../../arrangement/understood-record.js';
import { formatInterval } from '../../quantity/format-quantity.js';
import type { Dimension } from '../../quantity/quantity.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { alignTable } from '../align.js';
import type { Style } from '../style.js';
import { prose, section, sentence } from './prose.js';

/** What must be known of the records before anything is built on them; what nothing can be decided on first. */
export function concernsText(concerns: readonly Concern[], style: Style): string {
  const rank = { hinders: 0, weakens: 1 } as const;
  const lines = [...concerns]
    .sort((one, other) => rank[one.weight] - rank[other.weight])
    .map((concern) => {
      const line = prose(sentence(concernInWords(concern)), '- ');
      return concern.weight === 'hinders' ? style.warn(line) : line;
    });
  return section('About the records', lines, style);
}

function concernInWords({ module, text, run }: Concern): string {
  const said = text.startsWith(module) ? text : `${module}: ${text}`;
  return run === undefined || text.includes(run) ? said : `${said} (${run})`;
}

/** Every number that was taken over, and the record that it was taken from. */
export function sourcesText(modules: readonly ModuleProfile[], style: Style): string {
  return section('Where the numbers come from', modules.flatMap(ofModule), style, 'value ± 95 %');
}

/** A number or a word of a module, as a row shows it. */
interface Row {
  readonly from: RecordSource;
  readonly cells: readonly string[];
}

function ofModule(module: ModuleProfile): string[] {
  const rows = rowsOf(module);
  const widths = alignTable(
    rows.map(({ cells }) => cells),
    ['left', 'left', 'left'],
  );
  const runs = [...new Set(rows.map(({ from }) => from.run))];
  return runs.flatMap((run) => {
    const from = rows.find((row) => row.from.run === run)?.from;
    const lines = widths.filter((_, index) => rows[index]?.from.run === run);
    return [
      `${module.name}, ${run}${from === undefined ? '' : how(from)}`,
      ...lines.map((line) => `  ${line}`),
    ];
  });
}

/** Only what the name of the record does not tell. */
function how({ state, simulated }: RecordSource): string {
  const words = [
    ...(simulated ? ['simulated'] : []),
    ...(state === 'stopped' ? ['STOPPED'] : []),
    ...(state === 'cut-off' ? ['CUT OFF'] : []),
  ];
  return words.length === 0 ? '' : ` (${words.join(', ')})`;
}

function rowsOf(module: ModuleProfile): readonly Row[] {
  const { recommended, limitStyle, earth } = module;
  return [
    ...number('no load', module.openCircuit, 'voltage'),
    ...number('droop', module.droop, 'resistance'),
    ...number('usable', module.usable, 'current'),
    {
      from: recommended.from,
      cells: ['recommended', roundedDown(recommended.current, 'current'), recommended.why],
    },
    ...number('drops out', module.dropout, 'current'),
    ...number('into a short', module.shortCircuit, 'current'),
    ...word('past its limit', limitStyle?.word, limitStyle?.from),
    ...word('output to earth', earth?.relation, earth?.from),
  ];
}

function number(name: string, taken: Taken | undefined, dimension: Dimension): readonly Row[] {
  if (taken === undefined) return [];
  const [low, high] = taken.interval;
  const said = formatInterval(taken.value, low, high, dimension);
  const least = taken.bound === 'least' ? '≥ ' : '';
  const range = said.low === '' || said.high === '' ? '' : `, ${said.low} to ${said.high}`;
  return [{ from: taken.from, cells: [name, `${least}${said.value}${range} ${said.unit}`, taken.note] }];
}

function word(name: string, said: string | undefined, from: RecordSource | undefined): readonly Row[] {
  return said === undefined || from === undefined ? [] : [{ from, cells: [name, said, ''] }];
}
