import type { Contact, Joint, SteeringDiode } from '../../src/arrangement/stages-wish.js';
import type { Source, Switching } from '../../src/arrangement/switching.js';

export const makes = (name: string, ...joins: Joint): Contact => ({ kind: 'make', name, joins });
export const breaks = (name: string, ...joins: Joint): Contact => ({ kind: 'break', name, joins });
export const changes = (
  name: string,
  [common, rest, driven]: readonly [string, string, string],
  bridges = false,
): Contact => ({ kind: 'change-over', name, common, rest, driven, bridges });
export const diode = (name: string, from: string, to: string, forwardVoltage = 0.5): SteeringDiode => ({
  name,
  from,
  to,
  forwardVoltage,
});
export const source = (name: string, open = 12, label = 12): Source => ({ name, open, label });

export function switched(
  contacts: readonly Contact[],
  wires: readonly Joint[] = [],
  {
    diodes = [],
    sources = ['W1', 'W2'].map((name) => source(name)),
  }: { readonly diodes?: readonly SteeringDiode[]; readonly sources?: readonly Source[] } = {},
): Switching {
  return { contacts, wires, diodes, sources };
}

/** W1 and W2 side by side at rest, W2 upon W1 when all are driven, by single contacts. */
export const singleContacts: readonly Contact[] = [
  breaks('A', 'W1+', 'W2+'),
  breaks('B', 'W2-', 'in-'),
  makes('S', 'W1+', 'W2-'),
];
export const pairWires: readonly Joint[] = [
  ['W1-', 'in-'],
  ['W2+', 'in+'],
];
/** The same by two change-over contacts that meet at a node of their own. */
export const changeOvers = (bridges: boolean): readonly Contact[] => [
  changes('S1', ['W1+', 'W2+', 'link'], bridges),
  changes('S2', ['W2-', 'W1-', 'link'], bridges),
];
