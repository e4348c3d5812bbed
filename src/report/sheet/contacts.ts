import type { Movement, MovementVerdict, StagedBuild } from '../../arrangement/staged-build.js';
import type { Contact, Sequence } from '../../arrangement/stages-wish.js';
import { sentence } from '../build/prose.js';
import { type Content, element, type Markup } from '../page/markup.js';
import { table } from '../page/table.js';

/** Which contact stands how in which arrangement. */
export function contactsTable({ wish, arrangements }: StagedBuild): Markup | undefined {
  if (wish.contacts.length === 0) return undefined;
  const driven = new Map(wish.arrangements.map((each) => [each.name, new Set(each.driven)]));
  return table(
    'Contacts, in each arrangement.',
    [
      { heading: 'Contact', as: 'name' },
      { heading: 'Joins', as: 'fixed' },
      ...arrangements.map(({ name }) => ({ heading: name })),
    ],
    wish.contacts.map((contact) => [
      contact.name,
      joins(contact),
      ...arrangements.map(({ name }) => stateOf(contact, driven.get(name)?.has(contact.name) ?? false)),
    ]),
  );
}

function joins(contact: Contact): string {
  if (contact.kind === 'change-over') {
    const way = contact.bridges ? ', bridging' : '';
    return `${contact.common} to ${contact.rest} or ${contact.driven}${way}`;
  }
  return contact.joins.join(' to ');
}

/** In words, and those that carry current in bold. */
function stateOf(contact: Contact, isDriven: boolean): Content {
  switch (contact.kind) {
    case 'make':
      return isDriven ? element('strong', {}, 'closed') : 'open';
    case 'break':
      return isDriven ? 'open' : element('strong', {}, 'closed');
    case 'change-over':
      return element('strong', {}, `on ${isDriven ? contact.driven : contact.rest}`);
  }
}

const inWords: Readonly<Record<Sequence, string>> = {
  'any-order': 'Any order',
  'break-before-make': 'Break before make',
  'make-before-break': 'Make before break',
};

/** What the contacts pass through while they move, by how they are driven; that of the builder stands first. */
export function movements({ switchOvers, wish }: StagedBuild): Markup | undefined {
  const sequences = [
    wish.sequence,
    ...(Object.keys(inWords) as Sequence[]).filter((each) => each !== wish.sequence),
  ];
  return table(
    `While the contacts move, however late each of them is. They are to be driven ${inWords[wish.sequence].toLowerCase()}.`,
    [
      { heading: 'Change', as: 'name' },
      { heading: 'Moving' },
      ...sequences.map((each) => ({ heading: inWords[each], as: 'long' as const })),
    ],
    switchOvers.flatMap(({ lower, upper, goingUp, comingDown }) => [
      row(`${lower} → ${upper}`, goingUp, sequences),
      row(`${upper} → ${lower}`, comingDown, sequences),
    ]),
  );
}

function row(change: string, { moving, bySequence }: Movement, sequences: readonly Sequence[]): Content[] {
  return [change, moving.join(', '), ...sequences.map((each) => verdict(bySequence[each]))];
}

function verdict(said: MovementVerdict): Content {
  if (said.kind === 'forbidden')
    return [
      element('span', { class: 'state bad' }, 'Forbidden'),
      ` when ${said.order.join(', then ')}: ${sentence(said.connection.sentence)}`,
    ];
  const states = said.states === 1 ? 'its one state' : `all ${said.states} states`;
  return [
    element('span', { class: 'state good' }, 'Clear'),
    ` in ${states}${said.interrupts ? '; the feed is interrupted' : ''}.`,
  ];
}
