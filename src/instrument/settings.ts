import type { OperationValues } from './message.js';

/** An operation and what it was given. */
export interface Setting {
  readonly operation: string;
  readonly values: OperationValues;
}

/** Of operations that undo one another the last one counts; the families of those that keep a state. */
const families: readonly (readonly [name: string, member: RegExp])[] = [
  ['mode', /-mode$/],
  ['measures', /^measure-/],
  ['channels', /^(close-channel|open-all)$/],
];

const setPoints = ['set-current', 'set-voltage'];

/**
 * What an instrument was told and keeps for as long as it has power: its mode, its set-points, its protections,
 * the relay that it holds closed. What switches an input is no setting.
 */
export class Settings {
  readonly #told = new Map<string, Setting>();

  note(operation: string, values: OperationValues): void {
    const family = familyOf(operation);
    if (family === undefined) return;
    // What was set in one mode means nothing in another.
    if (family === 'mode') for (const setPoint of setPoints) this.#told.delete(setPoint);
    // In the order in which they were told last: a set-point comes after its mode.
    this.#told.delete(family);
    this.#told.set(family, { operation, values });
  }

  /** All that it must be told to be again as it was told to be. */
  inOrder(): readonly Setting[] {
    return [...this.#told.values()];
  }
}

function familyOf(operation: string): string | undefined {
  const family = families.find(([, member]) => member.test(operation));
  if (family !== undefined) return family[0];
  return /^(set|protect)-/.test(operation) ? operation : undefined;
}
