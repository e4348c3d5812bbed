import type { Movement, MovementVerdict, StagedBuild } from '../../arrangement/staged-build.js';
import type { Contact, Sequence } from '../../arrangement/stages-wish.js';
import { sentence } from '../build/prose.js';
import { type Content, element, type Markup, together } from '../page/markup.js';
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
  'any-order': 'in any order',
  'break-before-make': 'break before make',
  'make-before-break': 'make before break',
};

/** What the contacts pass through while they move: as they are to be driven, then as it would be otherwise. */
export function movements({ switchOvers, wish }: StagedBuild): Markup {
  const others = (Object.keys(inWords) as Sequence[]).filter((each) => each !== wish.sequence);
  const changes = switchOvers.flatMap(({ lower, upper, goingUp, comingDown }): Change[] => [
    { name: `${lower} → ${upper}`, movement: goingUp },
    { name: `${upper} → ${lower}`, movement: comingDown },
  ]);
  return together(
    table(
      `While the contacts move, driven ${inWords[wish.sequence]}, however late each of them is.`,
      [
        { heading: 'Change', as: 'name' },
        { heading: 'Moving' },
        { heading: 'What they pass through', as: 'long' },
      ],
      changes.map(({ name, movement: { moving, bySequence } }) => [
        name,
        moving.join(', '),
        verdict(bySequence[wish.sequence]),
      ]),
    ),
    table(
      'The same, if they were driven otherwise.',
      [
        { heading: 'Change', as: 'name' },
        { heading: 'Driven' },
        { heading: 'What they would pass through', as: 'long' },
      ],
      changes.flatMap(({ name, movement: { bySequence } }) =>
        others.map((each) => [name, inWords[each], verdict(bySequence[each])]),
      ),
    ),
  );
}

interface Change {
  readonly name: string;
  readonly movement: Movement;
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
