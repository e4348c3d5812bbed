import { UnfitWishError } from './arrangement-error.js';
import { forbiddenIn, isForbidden } from './forbidden-connection.js';
import type { Volts } from '../quantity/quantity.js';
import { potentialsOf } from './made-form.js';
import type { Movement, MovementVerdict } from './staged-build.js';
import { type Contact, type Sequence, sequences } from './stages-wish.js';
import {
  type ContactState,
  feeds,
  type Netlist,
  netlistOf,
  type Position,
  settledState,
  type Switching,
} from './switching.js';

/** Nine change-over contacts, or fourteen that open or close: looked through in seconds. */
const mostStates = 3 ** 9;

/** What a moving contact does at one moment. */
interface Step {
  readonly does: 'opens' | 'closes';
  readonly to: Position;
  readonly words: string;
}

/** A contact on its way, and whether it does its two steps in an order of its own. */
interface Mover {
  readonly contact: string;
  readonly steps: readonly Step[];
  readonly kind: 'simple' | 'breaks-first' | 'makes-first';
}

/**
 * Every state that the contacts pass through on the way from one arrangement to another when they don't move at
 * the same time, for each way of driving them.
 *
 * Those that open have all opened before any closes, or the other way round, or each moves when it likes. A
 * change-over contact that does not bridge breaks before it makes by itself, and one that bridges makes before
 * it breaks, however it is driven; where that goes against the sequence it may move at any moment of it.
 *
 * Cost: 2 to the power of the contacts that move, 3 for those that change over, times the loops of the circuit.
 * @throws UnfitWishError where more contacts move than can be looked at.
 */
export function movementBetween(
  switching: Switching,
  from: readonly string[],
  to: readonly string[],
): Movement {
  const movers = moversOf(switching.contacts, from, to);
  if (statesOf(movers) > mostStates) {
    throw new UnfitWishError(
      `${movers.length} contacts move at one switch-over and stand in ${statesOf(movers)} ways meanwhile; ${mostStates} at most can be looked at`,
      'Put an arrangement in between, or name contacts once that are one contact.',
    );
  }
  const look = lookedAt(switching, { from, to }, movers);
  const told = sequences.map((sequence) => ({ sequence, ...verdictOf(switching, movers, sequence, look) }));
  return {
    moving: movers.map(({ contact }) => contact),
    bySequence: Object.fromEntries(
      told.map(({ sequence, verdict }) => [sequence, verdict]),
    ) as Movement['bySequence'],
    lifts: Object.fromEntries(told.map(({ sequence, lift }) => [sequence, lift])) as NonNullable<
      Movement['lifts']
    >,
  };
}

/** Whether so few contacts move that every order of them can be looked at. */
export function canBeLookedAt(
  contacts: readonly Contact[],
  from: readonly string[],
  to: readonly string[],
  most = mostStates,
): boolean {
  return statesOf(moversOf(contacts, from, to)) <= most;
}

function statesOf(movers: readonly Mover[]): number {
  return movers.reduce((states, { steps }) => states * (steps.length + 1), 1);
}

function moversOf(
  contacts: readonly Contact[],
  from: readonly string[],
  to: readonly string[],
): readonly Mover[] {
  return contacts.flatMap((contact): Mover[] => {
    const drives = to.includes(contact.name);
    return from.includes(contact.name) === drives ? [] : [moverOf(contact, drives)];
  });
}

function moverOf(contact: Contact, drives: boolean): Mover {
  const { name } = contact;
  if (contact.kind !== 'change-over') {
    const closes = (contact.kind === 'make') === drives;
    const step: Step = closes
      ? { does: 'closes', to: 'closed', words: `${name} closes` }
      : { does: 'opens', to: 'open', words: `${name} opens` };
    return { contact: name, kind: 'simple', steps: [step] };
  }
  const end = drives ? 'driven' : 'rest';
  const [left, reached] = drives ? [contact.rest, contact.driven] : [contact.driven, contact.rest];
  if (contact.bridges) {
    const touches: Step = {
      does: 'closes',
      to: 'both',
      words: `${name} reaches ${reached}, still on ${left}`,
    };
    return {
      contact: name,
      kind: 'makes-first',
      steps: [touches, { does: 'opens', to: end, words: `${name} leaves ${left}` }],
    };
  }
  const leaves: Step = { does: 'opens', to: 'neither', words: `${name} leaves ${left}` };
  return {
    contact: name,
    kind: 'breaks-first',
    steps: [leaves, { does: 'closes', to: end, words: `${name} reaches ${reached}` }],
  };
}

/** How many of its steps each mover has done. */
type Progress = readonly number[];

interface Look {
  readonly forbidden: (progress: Progress) => boolean;
  readonly feeds: (progress: Progress) => boolean;
  /** Of in+. */
  readonly lift: (progress: Progress) => Volts;
  readonly netlist: (progress: Progress) => Netlist;
}

interface Ends {
  readonly from: readonly string[];
  readonly to: readonly string[];
}

/** Bonds to earth that short something; where they do so at an end already, that is told there. */
function bondsToWatch(switching: Switching, { from, to }: Ends): readonly string[] {
  const bonded = switching.bonded ?? [];
  const shorts = [from, to].some((driven) =>
    isForbidden(netlistOf(switching, settledState(switching.contacts, driven), bonded)),
  );
  return shorts ? [] : bonded;
}

/** The states, each looked at once for all three sequences. */
function lookedAt(switching: Switching, ends: Ends, movers: readonly Mover[]): Look {
  const start = settledState(switching.contacts, ends.from);
  const bonded = bondsToWatch(switching, ends);
  const state = (progress: Progress): ContactState => {
    const moved = new Map(start);
    for (const [index, { contact, steps }] of movers.entries()) {
      const step = steps[(progress[index] ?? 0) - 1];
      if (step !== undefined) moved.set(contact, step.to);
    }
    return moved;
  };
  const netlist = (progress: Progress): Netlist => netlistOf(switching, state(progress), bonded);
  const seen = new Map<
    string,
    { readonly forbidden: boolean; readonly feeds: boolean; readonly lift: Volts }
  >();
  const look = (progress: Progress) => {
    const key = progress.join('');
    const before = seen.get(key);
    if (before !== undefined) return before;
    const circuit = netlist(progress);
    const forbidden = isForbidden(circuit);
    // Round a forbidden loop there is no end of lifting.
    const lift = forbidden ? 0 : Math.max(0, potentialsOf(circuit)[circuit.plus] ?? 0);
    const found = { forbidden, feeds: feeds(circuit), lift };
    seen.set(key, found);
    return found;
  };
  return {
    forbidden: (progress) => look(progress).forbidden,
    feeds: (progress) => look(progress).feeds,
    lift: (progress) => look(progress).lift,
    netlist,
  };
}

interface Reached {
  readonly progress: Progress;
  readonly order: readonly string[];
}

/** The states by how many steps lead there, so that the first forbidden one is the nearest. */
function verdictOf(
  switching: Switching,
  movers: readonly Mover[],
  sequence: Sequence,
  look: Look,
): { readonly verdict: MovementVerdict; readonly lift: Volts } {
  const start: Reached = { progress: movers.map(() => 0), order: [] };
  const reached = new Map<string, Reached>([[start.progress.join(''), start]]);
  let interrupts = false;
  let lift: Volts = 0;
  for (const { progress, order } of reached.values()) {
    if (look.forbidden(progress)) {
      const connection = forbiddenIn(switching, look.netlist(progress));
      if (connection !== undefined) return { verdict: { kind: 'forbidden', order, connection }, lift };
    }
    interrupts ||= !look.feeds(progress);
    lift = Math.max(lift, look.lift(progress));
    for (const [index, { steps }] of movers.entries()) {
      const step = steps[progress[index] ?? 0];
      if (step === undefined || !mayStep(movers, progress, index, step, sequence)) continue;
      const next = progress.map((done, other) => (other === index ? done + 1 : done));
      const key = next.join('');
      if (!reached.has(key)) reached.set(key, { progress: next, order: [...order, step.words] });
    }
  }
  return { verdict: { kind: 'clear', states: reached.size, interrupts }, lift };
}

function mayStep(
  movers: readonly Mover[],
  progress: Progress,
  index: number,
  { does }: Step,
  sequence: Sequence,
): boolean {
  const own = movers[index]?.kind;
  const allDone = (what: Step['does'], except: Mover['kind']): boolean =>
    movers.every(
      ({ steps, kind }, other) =>
        kind === except || steps.slice(progress[other] ?? 0).every((left) => left.does !== what),
    );
  switch (sequence) {
    case 'any-order':
      return true;
    case 'break-before-make':
      return does === 'opens' || own === 'makes-first' || allDone('opens', 'makes-first');
    case 'make-before-break':
      return does === 'closes' || own === 'breaks-first' || allDone('closes', 'breaks-first');
  }
}
