import type { ModuleProfile } from '../../arrangement/module-profile.js';
import type { RecordSource } from '../../arrangement/understood-record.js';
import { listed } from '../../quantity/listed.js';
import { alignTable } from '../align.js';
import { inMinutes } from '../in-minutes.js';
import type { Style } from '../style.js';
import { type AlikeConcerns, alikeConcerns } from './alike-concerns.js';
import type { AnyBuild } from './any-build.js';
import { prose, section, sentence } from './prose.js';
import { takenRows } from './taken-rows.js';

/**
 * What must be known of the records before anything is built on them; what nothing can be decided on first. What
 * the answer has said already is not said twice, and what holds for several modules once.
 */
export function concernsText({ concerns, standing }: AnyBuild, style: Style): string {
  const said = standing.kind === 'may-be-built' ? [] : standing.because;
  const unsaid = concerns.filter(({ text }) => !said.some((because) => because.includes(text)));
  const lines = alikeConcerns(unsaid).map((group) => {
    const line = prose(sentence(inWords(group)), '- ');
    return group.weight === 'hinders' ? style.warn(line) : line;
  });
  return section('About the records', lines, style);
}

function inWords({ modules, text }: AlikeConcerns): string {
  const [first = ''] = modules;
  if (modules.length > 1) return `Each of ${listed(modules)}: ${text}`;
  return text.startsWith(first) ? text : `${first}: ${text}`;
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

function ofModule(module: ModuleProfile): string[] {
  const rows = takenRows(module);
  const heads = alignTable(
    rows.map(({ what, value }) => [what, value, '·']),
    ['left', 'left', 'left'],
  );
  const lines = rows.map(({ limits, note }, index) => besides(heads[index] ?? '', limits, note));
  const runs = new Map(rows.map(({ from }) => [from.run, from]));
  return [...runs.values()].flatMap((from) => [
    prose(sourceInWords(from), `${module.name}: `),
    ...lines.filter((_, index) => rows[index]?.from.run === from.run),
  ]);
}

/** What is said of a number stands beside it, and goes on below. */
function besides(head: string, limits: string, note: string): string {
  const said = [limits, note].filter((each) => each !== '').join('  ');
  return prose(said, `  ${head.replace('·', '')}`).replace(/ +$/gm, '');
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
