import type { Volts } from '../quantity/quantity.js';
import type { Contact, Joint, Node, StagesWish } from './stages-wish.js';

/** Where a contact stands; a change-over contact may be on neither side, or on both. */
export type Position = 'open' | 'closed' | 'rest' | 'driven' | 'neither' | 'both';
export type ContactState = ReadonlyMap<string, Position>;

/** A module as a source of so many volts, that of its label and that which was measured. */
export interface Source {
  readonly name: string;
  readonly label: Volts;
  readonly open: Volts;
}

/** What stays the same whatever the contacts do. */
export type Switching = Pick<StagesWish, 'contacts' | 'wires' | 'diodes'> & {
  readonly sources: readonly Source[];
  /** Modules whose 0 V is bonded to earth inside, as in- is taken to be. */
  readonly bonded?: readonly string[];
};

/** Something between two nodes that drives or passes a current, from the one to the other only. */
export type Element =
  | { readonly kind: 'module'; readonly source: Source; readonly from: number; readonly to: number }
  | {
      readonly kind: 'diode';
      readonly name: string;
      readonly forward: Volts;
      readonly from: number;
      readonly to: number;
    }
  /** The linear stage passes a reversed current, as the diode across its own transistor does. */
  | { readonly kind: 'linear-stage'; readonly from: number; readonly to: number };

/** The circuit that the contacts make in one state: nodes that are joined are one, by number. */
export interface Netlist {
  readonly nodes: number;
  readonly plus: number;
  readonly minus: number;
  readonly elements: readonly Element[];
  /** What has been joined, for the way through the contacts. */
  readonly joints: readonly NamedJoint[];
}

export interface NamedJoint {
  readonly joins: Joint;
  /** Undefined for a wire; a bond to earth by what it is. */
  readonly contact: string | undefined;
}

export const inputPlus = 'in+';
export const inputMinus = 'in-';

export function terminalsOf(element: Element, { diodes }: Pick<Switching, 'diodes'>): Joint {
  switch (element.kind) {
    case 'module':
      return [`${element.source.name}-`, `${element.source.name}+`];
    case 'diode': {
      const diode = diodes.find(({ name }) => name === element.name);
      return [diode?.from ?? '', diode?.to ?? ''];
    }
    case 'linear-stage':
      return [inputMinus, inputPlus];
  }
}

/** Where every contact stands when these are driven and none is moving. */
export function settledState(contacts: readonly Contact[], driven: readonly string[]): ContactState {
  return new Map(contacts.map((contact) => [contact.name, settled(contact, driven.includes(contact.name))]));
}

function settled(contact: Contact, isDriven: boolean): Position {
  switch (contact.kind) {
    case 'make':
      return isDriven ? 'closed' : 'open';
    case 'break':
      return isDriven ? 'open' : 'closed';
    case 'change-over':
      return isDriven ? 'driven' : 'rest';
  }
}

/**
 * The circuit of one state.
 * @param bonded modules whose 0 V earth joins to in-.
 */
export function netlistOf(
  switching: Switching,
  state: ContactState,
  bonded: readonly string[] = [],
): Netlist {
  const joints: readonly NamedJoint[] = [
    ...switching.wires.map((joins): NamedJoint => ({ joins, contact: undefined })),
    ...switching.contacts.flatMap((contact) =>
      jointsOf(contact, state.get(contact.name) ?? settled(contact, false)).map((joins): NamedJoint => ({
        joins,
        contact: contact.name,
      })),
    ),
    ...bonded.map((name): NamedJoint => ({
      joins: [`${name}-`, inputMinus],
      contact: `the bond of ${name} to earth`,
    })),
  ];
  const numberOf = merged(joints);
  const [minus, plus] = [numberOf(inputMinus), numberOf(inputPlus)];
  const elements: readonly Element[] = [
    ...switching.sources.map((source): Element => {
      const { name } = source;
      return { kind: 'module', source, from: numberOf(`${name}-`), to: numberOf(`${name}+`) };
    }),
    ...switching.diodes.map(({ name, from, to, forwardVoltage }): Element => {
      return { kind: 'diode', name, forward: forwardVoltage, from: numberOf(from), to: numberOf(to) };
    }),
    { kind: 'linear-stage', from: minus, to: plus },
  ];
  const nodes = 1 + Math.max(...elements.flatMap(({ from, to }) => [from, to]));
  return { nodes, plus, minus, elements, joints };
}

function jointsOf(contact: Contact, position: Position): readonly Joint[] {
  if (contact.kind !== 'change-over') return position === 'closed' ? [contact.joins] : [];
  const { common, rest, driven } = contact;
  return [
    ...(position === 'rest' || position === 'both' ? [[common, rest] as const] : []),
    ...(position === 'driven' || position === 'both' ? [[common, driven] as const] : []),
  ];
}

/** Gives each node a number, the same to all that are joined. */
function merged(joints: readonly NamedJoint[]): (node: Node) => number {
  const above = new Map<Node, Node>();
  const top = (node: Node): Node => {
    let at = node;
    for (let next = above.get(at); next !== undefined; next = above.get(at)) at = next;
    return at;
  };
  for (const {
    joins: [one, other],
  } of joints) {
    const [first, second] = [top(one), top(other)];
    if (first !== second) above.set(first, second);
  }
  const numbers = new Map<Node, number>();
  return (node) => {
    const joined = top(node);
    const number = numbers.get(joined) ?? numbers.size;
    numbers.set(joined, number);
    return number;
  };
}

/** The contacts on the shortest way from one node to another through what is joined. */
export function contactsBetween(joints: readonly NamedJoint[], from: Node, to: Node): readonly string[] {
  const ways = new Map<Node, readonly string[]>([[from, []]]);
  for (const [at, way] of ways) {
    if (at === to) return way;
    for (const { joins, contact } of joints) {
      const next = joins[0] === at ? joins[1] : joins[1] === at ? joins[0] : undefined;
      if (next === undefined || ways.has(next)) continue;
      ways.set(next, contact === undefined || way.includes(contact) ? way : [...way, contact]);
    }
  }
  return [];
}

/** Whether any current gets from the modules to the linear stage. */
export function feeds({ elements, minus, plus, nodes }: Netlist): boolean {
  // Each node without and with a module on the way to it.
  const reached = new Set<number>([minus]);
  for (const place of reached) {
    const [at, hasModule] = place >= nodes ? [place - nodes, true] : [place, false];
    for (const { kind, from, to } of elements) {
      if (kind === 'linear-stage' || from !== at) continue;
      reached.add(hasModule || kind === 'module' ? to + nodes : to);
    }
  }
  return reached.has(plus + nodes);
}
