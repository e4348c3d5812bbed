import type { Concern } from '../../arrangement/build.js';
import type { ModuleProfile, Taken } from '../../arrangement/module-profile.js';
import type { RecordSource } from '../../arrangement/understood-record.js';
import type { Dimension } from '../../quantity/quantity.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { brief } from '../build/brief.js';
import { estimateCells } from '../build/estimate-text.js';
import { inMinutes } from '../in-minutes.js';
import { type Content, element, type Markup } from '../page/markup.js';
import { bullets, section } from '../page/page.js';
import { table } from '../page/table.js';

/** What must be known of the records before anything is built on them; what nothing can be decided on first. */
export function concernsSection(concerns: readonly Concern[]): Markup | undefined {
  if (concerns.length === 0) return undefined;
  const of = (weight: Concern['weight']): readonly Content[] =>
    concerns.filter((concern) => concern.weight === weight).map(inWords);
  const hinders = of('hinders');
  const weakens = of('weakens');
  return section(
    'About the records',
    hinders.length > 0 && element('h3', {}, 'Nothing can be decided on these'),
    bullets(hinders),
    weakens.length > 0 && element('h3', {}, 'To be known and weighed'),
    bullets(weakens),
  );
}

function inWords({ module, run, text }: Concern): Content {
  return [
    element('strong', {}, module),
    `: ${text}${/[.!?]$/.test(text) ? '' : '.'}`,
    run !== undefined && [' ', element('span', { class: 'soft' }, `Record ${run}.`)],
  ];
}

/** What the labels say, and what the modules are. */
export function modulesSection(modules: readonly ModuleProfile[]): Markup | undefined {
  if (modules.length === 0) return undefined;
  return section(
    'Modules',
    table(
      'What their labels and files say of them.',
      [
        { heading: 'Module', as: 'name' },
        { heading: 'What it is', as: 'long' },
        { heading: 'Nameplate', as: 'fixed' },
        { heading: 'Class' },
        { heading: 'Output to earth bears', as: 'fixed' },
      ],
      modules.map((module) => [
        module.name,
        module.description,
        plateOf(module),
        module.protectionClass,
        module.outputIsolation === 'unknown' ? 'unknown' : brief(module.outputIsolation, 'voltage'),
      ]),
    ),
  );
}

/** `15 V, 4 A`. */
export function plateOf({ label }: ModuleProfile): string {
  return `${brief(label.voltage, 'voltage')}, ${brief(label.current, 'current')}`;
}

/** Every number that was taken over, and the record that it was taken from. */
export function sourcesSection(modules: readonly ModuleProfile[]): Markup | undefined {
  if (modules.length === 0) return undefined;
  const rows = modules.flatMap((module) => rowsOf(module).map((row) => ({ module, ...row })));
  const sources = [...new Map(rows.map(({ from }) => [from.run, from])).values()];
  const numberOf = (from: RecordSource): number => sources.findIndex(({ run }) => run === from.run) + 1;
  return section(
    'Where the numbers come from',
    table(
      'What was taken over, with its 95 % limits and the number of its record.',
      [
        { heading: 'Module', as: 'name' },
        { heading: 'What', as: 'fixed' },
        { heading: 'Value', as: 'number' },
        { heading: '95 %', as: 'fixed' },
        { heading: 'Record', as: 'number' },
      ],
      rows.map(({ module, what, cells, from }) => [module.name, what, ...cells, numberOf(from)]),
    ),
    table(
      'The records.',
      [
        { heading: 'No.', as: 'name' },
        { heading: 'Record' },
        { heading: 'Procedure', as: 'fixed' },
        { heading: 'Begun', as: 'fixed' },
        { heading: 'State' },
      ],
      sources.map((from, index) => [
        index + 1,
        from.run,
        from.procedure,
        inMinutes(from.began),
        `${states[from.state]}${from.simulated ? ', simulated' : ''}`,
      ]),
    ),
  );
}

const states: Readonly<Record<RecordSource['state'], string>> = {
  whole: 'whole',
  stopped: 'stopped early',
  'cut-off': 'cut off',
};

interface Row {
  readonly what: string;
  readonly cells: readonly [value: string, limits: string];
  readonly from: RecordSource;
}

function rowsOf(module: ModuleProfile): readonly Row[] {
  const { recommended, limitStyle, earth } = module;
  return [
    ...number('voltage at no load', module.openCircuit, 'voltage'),
    ...number('droop', module.droop, 'resistance'),
    ...number('usable', module.usable, 'current'),
    {
      what: 'recommended',
      cells: [roundedDown(recommended.current, 'current'), ''],
      from: recommended.from,
    },
    ...number('drops out at', module.dropout, 'current'),
    ...number('into a short', module.shortCircuit, 'current'),
    ...word('past its limit', limitStyle?.word, limitStyle?.from),
    ...word('output to earth', earth?.relation, earth?.from),
  ];
}

function number(what: string, taken: Taken | undefined, dimension: Dimension): readonly Row[] {
  if (taken === undefined) return [];
  const [low, high] = taken.interval;
  const bound = taken.bound === undefined ? {} : { bound: taken.bound };
  return [
    { what, cells: estimateCells({ value: taken.value, low, high, ...bound }, dimension), from: taken.from },
  ];
}

function word(what: string, said: string | undefined, from: RecordSource | undefined): readonly Row[] {
  return said === undefined || from === undefined ? [] : [{ what, cells: [said, ''], from }];
}
