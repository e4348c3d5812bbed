import type { Concern } from '../../arrangement/build.js';
import type { ModuleProfile } from '../../arrangement/module-profile.js';
import type { RecordSource } from '../../arrangement/understood-record.js';
import { listed } from '../../quantity/listed.js';
import { type AlikeConcerns, alikeConcerns } from '../build/alike-concerns.js';
import { brief } from '../build/brief.js';
import { stopped } from '../build/prose.js';
import { takenRows } from '../build/taken-rows.js';
import { inMinutes } from '../in-minutes.js';
import { type Content, element, type Markup } from '../page/markup.js';
import { bullets, section } from '../page/page.js';
import { table } from '../page/table.js';

/** What must be known of the records before anything is built on them; what nothing can be decided on first. */
export function concernsSection(concerns: readonly Concern[]): Markup | undefined {
  if (concerns.length === 0) return undefined;
  const groups = alikeConcerns(concerns);
  const hinders = groups.filter(({ weight }) => weight === 'hinders').map(inWords);
  const weakens = groups.filter(({ weight }) => weight === 'weakens').map(inWords);
  return section(
    'About the records',
    hinders.length > 0 && element('h3', {}, 'Nothing can be decided on these'),
    bullets(hinders),
    weakens.length > 0 && element('h3', {}, 'To be known and weighed'),
    bullets(weakens),
  );
}

function inWords({ modules, runs, text }: AlikeConcerns): Content {
  return [
    modules.length > 1 && 'Each of ',
    element('strong', {}, listed(modules)),
    `: ${stopped(text)}`,
    runs.length > 0 && [
      ' ',
      element('span', { class: 'soft' }, `Record${runs.length === 1 ? '' : 's'} ${listed(runs)}.`),
    ],
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
  const rows = modules.flatMap((module) => takenRows(module).map((row) => ({ module, ...row })));
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
        { heading: 'No.', as: 'number' },
        { heading: 'Note' },
      ],
      rows.map(({ module, what, value, limits, note, from }) => [
        module.name,
        what,
        value,
        limits,
        numberOf(from),
        note,
      ]),
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
