import { didYouMean } from '../quantity/nearest.js';
import { shown } from '../quantity/shown-text.js';
import { namePattern } from './name-pattern.js';
import type { Stages, StagesContact, StagesForm } from './stages.js';
import type { Complaint } from './yaml-document.js';

/** What no key alone can tell: whether names and nodes mean something, and each thing stands once. */
export function* stagesProblems(stages: Stages): Generator<Complaint> {
  yield* nameProblems(stages);
  yield* nodeProblems(stages);
  yield* arrangementProblems(stages);
}

function* nameProblems({ modules, wish }: Stages): Generator<Complaint> {
  const kinds = [
    ['modules', modules],
    ['contacts', wish.contacts],
    ['diodes', wish.diodes],
    ['arrangements', wish.arrangements],
  ] as const;
  const owners = new Map<string, string>();
  for (const [kind, things] of kinds) {
    for (const { name } of things) {
      const complain = (message: string): Complaint => ({ path: [kind], key: name, message });
      if (!namePattern.test(name))
        yield complain(
          `${shown(name)} is no name: 1 to 64 letters, digits, '.', '_' or '-', not starting with '.'`,
        );
      if (kind === 'modules' && name === 'in')
        yield complain("'in' is the input of the linear stage; call the module something else");
      if (kind === 'arrangements') continue;
      const owner = owners.get(name);
      if (owner !== undefined) yield complain(`${shown(name)} is the name of one of the ${owner} already`);
      owners.set(name, kind);
    }
  }
}

interface Place {
  readonly path: readonly PropertyKey[];
  readonly node: string;
}

function* nodeProblems(stages: Stages): Generator<Complaint> {
  const places = placesOf(stages);
  const outputs = ['in', ...stages.modules.map(({ name }) => name)].flatMap((name) => [
    `${name}+`,
    `${name}-`,
  ]);
  const fixed = new Set(outputs);
  const uses = new Map<string, number>();
  for (const { node } of places) uses.set(node, (uses.get(node) ?? 0) + 1);
  const known = [...outputs, ...[...uses].filter(([, count]) => count > 1).map(([node]) => node)];
  for (const { path, node } of places) {
    if (fixed.has(node)) continue;
    const others = known.filter((each) => each !== node);
    if (/[+-]$/.test(node)) {
      const message = `no module of this file has an output ${shown(node)}${didYouMean(node, others)}`;
      yield { path, message };
    } else if (uses.get(node) === 1) {
      const guess = didYouMean(node, others) || '; a node of your own joins at least two things';
      yield { path, message: `the node ${shown(node)} stands here only${guess}` };
    }
  }
  yield* selfJoined(stages);
  for (const node of ['in+', 'in-']) {
    if (uses.has(node)) continue;
    yield { path: ['contacts'], message: `nothing is joined to ${node}, the input of the linear stage` };
  }
}

function placesOf({ wish }: Stages): readonly Place[] {
  return [
    ...wish.wires.flatMap((joins, index) =>
      joins.map((node, side): Place => ({ path: ['wires', index, side], node })),
    ),
    ...wish.contacts.flatMap(contactPlaces),
    ...wish.diodes.flatMap(({ name, from, to }): Place[] => [
      { path: ['diodes', name, 'from'], node: from },
      { path: ['diodes', name, 'to'], node: to },
    ]),
  ];
}

function contactPlaces(contact: StagesContact): readonly Place[] {
  const at = (...path: PropertyKey[]): PropertyKey[] => ['contacts', contact.name, ...path];
  if (contact.kind === 'change-over') {
    const { common, rest, driven } = contact;
    return [
      { path: at('common'), node: common },
      { path: at('rest'), node: rest },
      { path: at('driven'), node: driven },
    ];
  }
  const key = `${contact.kind}s`;
  return contact.joins.map((node, side) => ({ path: at(key, side), node }));
}

function* selfJoined({ wish }: Stages): Generator<Complaint> {
  const both = (path: readonly PropertyKey[], nodes: readonly string[]): readonly Complaint[] =>
    new Set(nodes).size === nodes.length
      ? []
      : [{ path, message: 'this is one and the same node; two are needed' }];
  for (const [index, joins] of wish.wires.entries()) yield* both(['wires', index], joins);
  for (const { name, from, to } of wish.diodes) yield* both(['diodes', name], [from, to]);
  for (const contact of wish.contacts) {
    const path = ['contacts', contact.name];
    if (contact.kind === 'change-over') yield* both(path, [contact.common, contact.rest, contact.driven]);
    else yield* both([...path, `${contact.kind}s`], contact.joins);
  }
}

function* arrangementProblems({ modules, wish }: Stages): Generator<Complaint> {
  const names = modules.map(({ name }) => name);
  const contacts = wish.contacts.map(({ name }) => name);
  const used = new Set<string>();
  for (const { name, form, driven } of wish.arrangements) {
    const path = ['arrangements', name];
    const seen = new Set<string>();
    for (const module of modulesIn(form)) {
      if (!names.includes(module)) {
        yield { path, message: `no module is called ${shown(module)}${didYouMean(module, names)}` };
      } else if (seen.has(module)) {
        yield { path, message: `${module} stands in it twice; a module can be in one place only` };
      }
      seen.add(module);
      used.add(module);
    }
    for (const [index, contact] of driven.entries()) {
      const at = [...path, 'driven', index];
      if (!contacts.includes(contact)) {
        yield { path: at, message: `no contact is called ${shown(contact)}${didYouMean(contact, contacts)}` };
      } else if (driven.indexOf(contact) < index) {
        yield { path: at, message: `${contact} stands here twice` };
      }
    }
  }
  for (const name of names) {
    if (used.has(name)) continue;
    yield { path: ['modules'], key: name, message: `${name} is in no arrangement; use it or leave it out` };
  }
}

function modulesIn(form: StagesForm): readonly string[] {
  return form.kind === 'module' ? [form.name] : form.of.flatMap(modulesIn);
}
