import { asGiven } from '../../analysis/in-words.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import type { RunHeader } from '../../record/run-header.js';
import type { ComparedRecords } from '../comparison.js';
import { inMinutes } from '../in-minutes.js';
import { type Content, element, type Markup } from '../page/markup.js';
import { bullets, section } from '../page/page.js';
import { table } from '../page/table.js';
import { circuitInWords, modulesInWords, plateInWords, takenOverInWords } from '../record-heading.js';
import { endedHow, type Result } from '../result.js';
import { unlikeIn } from './unlike.js';

type Module = RunHeader['modules'][number];

/** What is compared with what, and what differs between the two besides the module. */
export function basisSection({ before, after }: ComparedRecords): Markup {
  const unlike = unlikeIn(before, after);
  return section(
    'What is compared with what',
    table(
      'The two records. Below name and time, what is not the same in both is in bold.',
      [
        { heading: 'What', as: 'name' },
        { heading: 'Earlier', as: 'long' },
        { heading: 'Later', as: 'long' },
      ],
      rowsOf(before, after),
    ),
    element('h3', {}, 'To be weighed before the two are compared'),
    unlike.length === 0
      ? element('p', {}, 'Nothing that the records tell of: the same procedure, on the same bench.')
      : bullets(unlike),
  );
}

function rowsOf(before: Result, after: Result): readonly (readonly Content[])[] {
  const later = aspectsOf(after);
  const unlike = Object.entries(aspectsOf(before)).map(([what, then]): readonly [string, string, string] => [
    what,
    then,
    later[what] ?? '',
  ]);
  return [
    ['Record', before.run, after.run],
    ['Begun', inMinutes(before.header.began), inMinutes(after.header.began)],
    ...unlike.filter(([, then, now]) => then !== '' || now !== '').map(sideBySide),
  ];
}

function sideBySide([what, then, now]: readonly [string, string, string]): readonly Content[] {
  if (then === now) return [what, then, element('span', { class: 'soft' }, 'the same')];
  return [what, ...[then, now].map((text) => element('strong', {}, text === '' ? 'none' : text))];
}

/** What a reader asks of a record before its numbers; empty where there is nothing to say. */
function aspectsOf(result: Result): Readonly<Record<string, string>> {
  const { header, evidence } = result;
  const { bench, procedure, modules } = header;
  const { how, reason } = endedHow(result);
  return {
    Modules: modulesInWords(header),
    Description: ofEach(modules, ({ description }) => [description].filter(isSaid)),
    Nameplate: ofEach(modules, ({ rated }) => [plateInWords(rated)]),
    Circuit: circuitInWords(header).join(''),
    'Changes so far': ofEach(modules, ({ changes }) => changes.map(({ date, what }) => `${date}: ${what}`)),
    Procedure: `${procedure.name}: ${procedure.title}`,
    Ended: how === 'completed' ? 'completed' : `${how}${reason === null ? '' : `: ${reason}`}`,
    Bench: `${bench.name}${bench.simulated ? ', simulated' : ''}`,
    'Voltage read': bench.voltageFrom === 'meter-at-module' ? 'by the meter, at the module' : 'by the load',
    Leads: `${asGiven(bench.leads.resistance, 'resistance')} ± ${asGiven(bench.leads.uncertainty, 'resistance')}`,
    'Air at the bench':
      bench.ambient === undefined ? '' : formatQuantity(bench.ambient.temperature, 'temperature'),
    'Taken over': takenOverInWords(evidence).join('; '),
  };
}

/** What is said of each module; of several with its name: `K1: 15 V, 4 A; K2: 15 V, 5 A`. */
function ofEach(modules: readonly Module[], said: (module: Module) => readonly string[]): string {
  return modules
    .flatMap((module) =>
      said(module).map((text) => (modules.length === 1 ? text : `${module.name}: ${text}`)),
    )
    .join('; ');
}

function isSaid(text: string): boolean {
  return text !== '';
}
