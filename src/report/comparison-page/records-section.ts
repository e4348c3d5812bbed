import { formatQuantity } from '../../quantity/format-quantity.js';
import type { RunHeader } from '../../record/run-header.js';
import type { ComparedRecords } from '../comparison.js';
import type { Content, Markup } from '../page/markup.js';
import { section } from '../page/page.js';
import { table } from '../page/table.js';
import { journalInWords } from '../record-words.js';
import type { Result } from '../result.js';
import { code } from '../page/facts.js';

/** By what the two records are known again, and how much of them can be believed. */
export function recordsSection({ before, after }: ComparedRecords): Markup {
  return section(
    'The records',
    table(
      'A record whose fingerprints are others than these is not the one that is compared here.',
      [
        { heading: 'What', as: 'name' },
        { heading: 'Earlier', as: 'long' },
        { heading: 'Later', as: 'long' },
      ],
      rows.map(([what, of]) => [what, of(before), of(after)]),
    ),
  );
}

const rows: readonly (readonly [what: string, of: (result: Result) => Content])[] = [
  ['Record', ({ run }) => code(run)],
  ['Journal', ({ integrity }) => journalInWords(integrity)],
  ['Readings', ({ evidence }) => String(evidence.readings)],
  ['Lasted', ({ evidence }) => formatQuantity(evidence.lasted, 'time', { significant: 3 })],
  ['Made by', ({ header: { program } }) => `${program.name} ${program.version}`],
  ['SHA-256 of run.json', ({ fingerprints }) => code(fingerprints.header)],
  ['Last seal', ({ fingerprints: { lastSeal } }) => (lastSeal === undefined ? 'none' : code(lastSeal))],
];

/** Which instruments either was made with, side by side. */
export function instrumentsSection({ before, after }: ComparedRecords): Markup | undefined {
  const roles = [
    ...new Set([before, after].flatMap(({ header }) => header.instruments.map(({ role }) => role))),
  ];
  if (roles.length === 0) return undefined;
  return section(
    'Instruments',
    table(
      'As they named themselves, with the driver and the address.',
      [
        { heading: 'Instrument', as: 'name' },
        { heading: 'Earlier', as: 'long' },
        { heading: 'Later', as: 'long' },
      ],
      roles.map((role) => [role, inWords(before.header, role), inWords(after.header, role)]),
    ),
  );
}

function inWords({ instruments }: RunHeader, role: string): string {
  const instrument = instruments.find((each) => each.role === role);
  return instrument === undefined
    ? 'none'
    : `${instrument.identity}, ${instrument.driver}, ${instrument.address}`;
}
