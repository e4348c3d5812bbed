import { describe, expect, it } from 'vitest';
import { forbiddenIn } from '../../src/arrangement/forbidden-connection.js';
import { movementBetween } from '../../src/arrangement/movements.js';
import type { Contact } from '../../src/arrangement/stages-wish.js';
import { netlistOf, type Position, settledState, type Switching } from '../../src/arrangement/switching.js';
import fc from '../property.js';
import {
  breaks,
  changeOvers,
  changes,
  makes,
  pairWires,
  singleContacts,
  source,
  switched,
} from './switched.js';

describe('from side by side to one upon the other by single contacts', () => {
  const { moving, bySequence } = movementBetween(switched(singleContacts, pairWires), [], ['A', 'B', 'S']);

  it('the contact that closes too early shorts a module, and the order says so', () => {
    expect(moving).toEqual(['A', 'B', 'S']);
    expect(bySequence['any-order']).toMatchObject({
      kind: 'forbidden',
      order: ['S closes'],
      connection: { kind: 'short', volts: 12 },
    });
    expect(bySequence['make-before-break']).toMatchObject({ kind: 'forbidden', order: ['S closes'] });
  });

  it('all is well where whatever opens has opened before, but nothing feeds the stage in between', () => {
    // Both closed, one of either open, both open, and the end.
    expect(bySequence['break-before-make']).toEqual({ kind: 'clear', states: 5, interrupts: true });
  });

  it('coming back, the contacts that close too early do it', () => {
    const back = movementBetween(switched(singleContacts, pairWires), ['A', 'B', 'S'], []);
    expect(back.bySequence['any-order']).toMatchObject({ kind: 'forbidden', connection: { kind: 'short' } });
    expect(back.bySequence['any-order']).toHaveProperty('order.length', 1);
    expect(back.bySequence['break-before-make']).toMatchObject({ kind: 'clear' });
  });
});

it('one module that stays joined feeds the stage all the time', () => {
  const tap = switched(
    [makes('S', 'W2+', 'in+'), breaks('T', 'W1+', 'in+')],
    [
      ['W1-', 'in-'],
      ['W1+', 'W2-'],
    ],
  );
  const { bySequence } = movementBetween(tap, [], ['S', 'T']);
  expect(bySequence['break-before-make']).toMatchObject({ kind: 'clear', interrupts: true });
  expect(bySequence['make-before-break']).toMatchObject({
    kind: 'forbidden',
    order: ['S closes'],
    connection: { kind: 'short', modules: ['W2'], through: ['S', 'T'] },
  });
  const added = switched(
    [makes('S', 'W2+', 'in+')],
    [
      ['W1-', 'in-'],
      ['W1+', 'in+'],
      ['W2-', 'in-'],
    ],
  );
  expect(movementBetween(added, [], ['S']).bySequence['any-order']).toEqual({
    kind: 'clear',
    states: 2,
    interrupts: false,
  });
});

describe('change-over contacts', () => {
  it('that touch neither side in between are safe in any order', () => {
    const { bySequence } = movementBetween(switched(changeOvers(false), pairWires), [], ['S1', 'S2']);
    expect(bySequence['any-order']).toEqual({ kind: 'clear', states: 9, interrupts: true });
    expect(bySequence['break-before-make']).toMatchObject({ kind: 'clear', states: 7 });
  });

  it('that bridge short a module, however they are driven', () => {
    const { bySequence } = movementBetween(switched(changeOvers(true), pairWires), [], ['S1', 'S2']);
    for (const verdict of Object.values(bySequence)) {
      expect(verdict).toMatchObject({
        kind: 'forbidden',
        order: ['S1 reaches link, still on W2+', 'S2 reaches link, still on W1-'],
        connection: { kind: 'short' },
      });
    }
  });

  it('that bridge never leave the stage without feed', () => {
    const contact = changes('S', ['in+', 'W1+', 'W2+'], true);
    const switching = switched(
      [contact],
      [
        ['W1-', 'in-'],
        ['W2-', 'in-'],
      ],
    );
    const { bySequence } = movementBetween(switching, [], ['S']);
    expect(bySequence['break-before-make']).toEqual({ kind: 'clear', states: 3, interrupts: false });
  });
});

it('more contacts than can be looked at are refused', () => {
  const many = Array.from({ length: 15 }, (_, index) => makes(`S${index}`, 'W1+', `x${index}`));
  const driven = many.map(({ name }) => name);
  expect(() => movementBetween(switched(many), [], driven)).toThrow(
    '15 contacts move at one switch-over and stand in 32768 ways meanwhile; 19683 at most can be looked at',
  );
});

it('every order is looked at: a random order never finds what was called clear, and a told order leads there', () => {
  const nodes = ['in+', 'in-', 'x', 'W1+', 'W1-', 'W2+', 'W2-'];
  const triple = fc.shuffledSubarray(nodes, { minLength: 3, maxLength: 3 });
  const contact = fc.oneof(
    triple.map(([one = '', other = '']) => ({ kind: 'make', joins: [one, other] }) as const),
    triple.map(([one = '', other = '']) => ({ kind: 'break', joins: [one, other] }) as const),
    fc
      .tuple(triple, fc.boolean())
      .map(
        ([[common = '', rest = '', driven = ''], bridges]) =>
          ({ kind: 'change-over', common, rest, driven, bridges }) as const,
      ),
  );
  const outcomes = { clear: 0, forbidden: 0 };
  fc.assert(
    fc.property(
      fc.array(contact, { minLength: 2, maxLength: 4 }),
      fc.infiniteStream(fc.nat(1000)),
      (made, random) => {
        const contacts = made.map((each, index): Contact => ({ ...each, name: `S${index}` }));
        const switching = switched(contacts, [], { sources: [source('W1'), source('W2')] });
        const verdict = movementBetween(
          switching,
          [],
          contacts.map(({ name }) => name),
        ).bySequence['any-order'];
        outcomes[verdict.kind] += 1;
        if (verdict.kind === 'clear') {
          for (let turn = 0; turn < 10; turn += 1) {
            const order = randomOrder(contacts, () => random.next().value as number);
            expect(order.find((state) => isForbiddenState(switching, state))).toBeUndefined();
          }
        } else {
          const end = followed(contacts, verdict.order);
          expect(isForbiddenState(switching, end)).toBe(true);
        }
      },
    ),
    { numRuns: 300 },
  );
  expect(Math.min(outcomes.clear, outcomes.forbidden)).toBeGreaterThan(20);
});

type State = ReadonlyMap<string, Position>;

function isForbiddenState(switching: Switching, state: State): boolean {
  return forbiddenIn(switching, netlistOf(switching, state)) !== undefined;
}

function waysOf(contact: Contact): readonly Position[] {
  if (contact.kind === 'make') return ['closed'];
  if (contact.kind === 'break') return ['open'];
  return [contact.bridges ? 'both' : 'neither', 'driven'];
}

function randomOrder(contacts: readonly Contact[], next: () => number): readonly State[] {
  const left = contacts.map((contact) => ({ name: contact.name, ways: [...waysOf(contact)] }));
  const state = new Map(settledState(contacts, []));
  const states: State[] = [new Map(state)];
  for (;;) {
    const movable = left.filter(({ ways }) => ways.length > 0);
    const chosen = movable[next() % Math.max(1, movable.length)];
    const position = chosen?.ways.shift();
    if (chosen === undefined || position === undefined) return states;
    state.set(chosen.name, position);
    states.push(new Map(state));
  }
}

/** Where the contacts stand after an order as it is told in words. */
function followed(contacts: readonly Contact[], order: readonly string[]): State {
  const state = new Map(settledState(contacts, []));
  for (const words of order) {
    const [name = ''] = words.split(' ');
    const contact = contacts.find((each) => each.name === name);
    if (contact === undefined) throw new Error(`no contact moves in '${words}'`);
    const [first = 'open', second] = waysOf(contact);
    state.set(name, state.get(name) === first && second !== undefined ? second : first);
  }
  return state;
}
