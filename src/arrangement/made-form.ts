import { listed } from '../quantity/listed.js';
import type { Volts } from '../quantity/quantity.js';
import type { Form } from './build.js';
import { arcsOf, usualMismatch } from './forbidden-connection.js';
import type { Netlist } from './switching.js';
import type { FormBehindDrops } from './worst-form.js';

/** What the contacts make of the modules between in- and in+. */
export type MadeForm =
  | { readonly kind: 'form'; readonly form: FormBehindDrops; readonly diodes: readonly string[] }
  /** No module feeds the linear stage. */
  | { readonly kind: 'nothing' }
  /** Something that is neither side by side nor one upon the other. */
  | { readonly kind: 'neither'; readonly modules: readonly string[] };

/** A part of the circuit between two nodes, that feeds from the one towards the other. */
interface Branch {
  readonly from: number;
  readonly to: number;
  readonly part: Part;
}
type Part =
  | { readonly kind: 'module'; readonly name: string }
  | { readonly kind: 'diode'; readonly name: string; readonly drop: Volts }
  | { readonly kind: 'group' | 'stack'; readonly of: readonly Part[] };

/**
 * The circuit of a settled state, with nothing forbidden in it, as groups and stacks: what is one upon the other
 * becomes one branch, and so does what is side by side, until a single branch from in- to in+ is left. What
 * leads nowhere is left out before, and diodes that block.
 */
export function madeForm(netlist: Netlist): MadeForm {
  const { minus, plus } = netlist;
  const branches = fedBranches(conducting(netlist), minus, plus);
  if (modulesIn(branches).length === 0) return { kind: 'nothing' };
  const [single, ...others] = reduced(branches, minus, plus);
  if (single === undefined || others.length > 0 || single.from !== minus || single.to !== plus) {
    return { kind: 'neither', modules: modulesIn(branches) };
  }
  const form = formOf(single.part);
  if (form === undefined) return { kind: 'nothing' };
  return { kind: 'form', form, diodes: namesOf(single.part, 'diode') };
}

/** Modules, and the diodes that the modules can drive a current through. */
function conducting(netlist: Netlist): readonly Branch[] {
  const potentials = potentialsOf(netlist);
  const mayDiffer = usualMismatch * Math.max(0, ...labelsOf(netlist));
  return netlist.elements.flatMap((element): Branch[] => {
    const { from, to } = element;
    if (element.kind === 'linear-stage' || from === to) return [];
    if (element.kind === 'module') return [{ from, to, part: { kind: 'module', name: element.source.name } }];
    const across = (potentials[from] ?? 0) - element.forward - (potentials[to] ?? 0);
    const { name, forward: drop } = element;
    return across >= -mayDiffer ? [{ from, to, part: { kind: 'diode', name, drop } }] : [];
  });
}

function labelsOf({ elements }: Netlist): readonly Volts[] {
  return elements.flatMap((element) => (element.kind === 'module' ? [element.source.label] : []));
}

/** How high, at least, each node is lifted above in- by what can lift it. */
export function potentialsOf(netlist: Netlist): readonly Volts[] {
  const arcs = arcsOf(netlist);
  const lifted = new Array<Volts>(netlist.nodes).fill(Number.NEGATIVE_INFINITY);
  lifted[netlist.minus] = 0;
  let isRaised = true;
  for (let round = 0; isRaised && round < netlist.nodes; round += 1) {
    isRaised = false;
    for (const { element, from, to, gain } of arcs) {
      if (element.kind === 'linear-stage') continue;
      const sum = (lifted[from] ?? 0) + gain;
      if (sum <= (lifted[to] ?? 0)) continue;
      lifted[to] = sum;
      isRaised = true;
    }
  }
  return lifted;
}

/** The branches through which a current gets from in- to in+. */
function fedBranches(branches: readonly Branch[], minus: number, plus: number): readonly Branch[] {
  const forth = reach(minus, branches, 'from', 'to');
  const back = reach(plus, branches, 'to', 'from');
  return branches.filter(({ from, to }) => forth.has(from) && back.has(to) && to !== minus && from !== plus);
}

function reach(
  start: number,
  branches: readonly Branch[],
  near: 'from' | 'to',
  far: 'from' | 'to',
): ReadonlySet<number> {
  const reached = new Set([start]);
  for (const at of reached) {
    for (const branch of branches) if (branch[near] === at) reached.add(branch[far]);
  }
  return reached;
}

function reduced(all: readonly Branch[], minus: number, plus: number): readonly Branch[] {
  let branches = all;
  for (;;) {
    const fewer = besideReduced(branches) ?? uponReduced(branches, minus, plus);
    if (fewer === undefined) return branches;
    branches = fewer;
  }
}

/** Two branches between the same nodes become one. */
function besideReduced(branches: readonly Branch[]): readonly Branch[] | undefined {
  for (const [index, one] of branches.entries()) {
    const other = branches.slice(index + 1).find(({ from, to }) => from === one.from && to === one.to);
    if (other === undefined) continue;
    const part = joinedParts('group', one.part, other.part);
    return [...branches.filter((each) => each !== one && each !== other), { ...one, part }];
  }
  return undefined;
}

/** A branch that ends where just one begins, and nothing else touches, goes on into that. */
function uponReduced(
  branches: readonly Branch[],
  minus: number,
  plus: number,
): readonly Branch[] | undefined {
  for (const one of branches) {
    const at = one.to;
    if (at === plus || at === minus) continue;
    const [other, ...more] = branches.filter((each) => each !== one && (each.from === at || each.to === at));
    if (other?.from !== at || more.length > 0) continue;
    const part = joinedParts('stack', one.part, other.part);
    const merged = { from: one.from, to: other.to, part };
    return [...branches.filter((each) => each !== one && each !== other), merged];
  }
  return undefined;
}

function joinedParts(kind: 'group' | 'stack', one: Part, other: Part): Part {
  const partsOf = (part: Part): readonly Part[] => (part.kind === kind ? part.of : [part]);
  return { kind, of: [...partsOf(one), ...partsOf(other)] };
}

/** Diodes in a stack lower what is stacked; side by side with each other they are one. */
function formOf(part: Part): FormBehindDrops | undefined {
  if (part.kind === 'module') return part;
  if (part.kind === 'diode') return undefined;
  const forms = part.of.map(formOf).filter((form) => form !== undefined);
  const [only] = forms;
  const joined: FormBehindDrops | undefined = forms.length < 2 ? only : { kind: part.kind, of: forms };
  if (joined === undefined || part.kind === 'group') return joined;
  const drop = part.of.reduce((sum, each) => sum + dropOf(each), 0);
  return drop === 0 ? joined : { kind: 'behind', drop, of: joined };
}

/** Of a part that holds diodes only. */
function dropOf(part: Part): Volts {
  if (part.kind === 'module' || namesOf(part, 'module').length > 0) return 0;
  if (part.kind === 'diode') return part.drop;
  const drops = part.of.map(dropOf);
  return part.kind === 'group' ? Math.max(...drops) : drops.reduce((sum, drop) => sum + drop, 0);
}

function namesOf(part: Part, kind: 'module' | 'diode'): readonly string[] {
  if (part.kind === 'module' || part.kind === 'diode') return part.kind === kind ? [part.name] : [];
  return part.of.flatMap((each) => namesOf(each, kind));
}

function modulesIn(branches: readonly Branch[]): readonly string[] {
  return branches.flatMap(({ part }) => namesOf(part, 'module'));
}

/** The same form without what its parts stand behind. */
export function withoutDrops(form: FormBehindDrops): Form {
  switch (form.kind) {
    case 'module':
      return form;
    case 'behind':
      return withoutDrops(form.of);
    case 'group':
    case 'stack':
      return { kind: form.kind, of: form.of.map(withoutDrops) };
  }
}

/** Whether two forms are one and the same circuit: the members of a group in any order, those of a stack in theirs. */
export function isSameForm(one: Form, other: Form): boolean {
  return inOneOrder(one) === inOneOrder(other);
}

function inOneOrder(form: Form): string {
  if (form.kind === 'module') return form.name;
  const parts = membersOf(form, form.kind).map(inOneOrder);
  return `${form.kind}(${(form.kind === 'group' ? parts.sort() : parts).join(' ')})`;
}

/** A group within a group is no other circuit than the one group. */
function membersOf(form: Form, kind: Form['kind']): readonly Form[] {
  return form.kind === kind && form.kind !== 'module'
    ? form.of.flatMap((part) => membersOf(part, kind))
    : [form];
}

/** `the group of W1 and W2`, `the stack of W1 and the group of W2 and W3`. */
export function formInWords(form: Form): string {
  return form.kind === 'module' ? form.name : `the ${form.kind} of ${listed(form.of.map(formInWords))}`;
}
