import type { Seconds } from '../quantity/quantity.js';

/** One thing that went over the line, as a dialogue reports it while it goes on. */
export interface TraceEntry {
  /** By the clock of the dialogue. */
  readonly t: Seconds;
  readonly direction: 'sent' | 'received';
  readonly bytes: Uint8Array;
}

export type Trace = (entry: TraceEntry) => void;

const format = 'railproof/dialogue 1';

/**
 * The file format of a recorded dialogue is JSON Lines: a first line that names the format and the address,
 * then a line for each piece sent or received. Text is Latin-1, one character a byte, so every byte survives.
 */
export function dialogueHeader(address: string): string {
  return `${JSON.stringify({ format, address })}\n`;
}

export function dialogueLine({ t, direction, bytes }: TraceEntry): string {
  return `${JSON.stringify({ t, [direction]: Buffer.from(bytes).toString('latin1') })}\n`;
}

/** The address named by the first line, or undefined when that is not what the line is. */
export function readDialogueHeader(line: string): string | undefined {
  const header = objectIn(line);
  return header?.['format'] === format && typeof header['address'] === 'string'
    ? header['address']
    : undefined;
}

/** One line after the first, or undefined when it is not in the format. */
export function readDialogueLine(line: string): TraceEntry | undefined {
  const entry = objectIn(line);
  if (entry === undefined || Object.keys(entry).length !== 2) return undefined;
  const t = entry['t'];
  if (typeof t !== 'number' || !Number.isFinite(t)) return undefined;
  for (const direction of ['sent', 'received'] as const) {
    const text = entry[direction];
    if (typeof text === 'string')
      return isLatin1(text) ? { t, direction, bytes: Buffer.from(text, 'latin1') } : undefined;
  }
  return undefined;
}

function isLatin1(text: string): boolean {
  return /^[\p{ASCII}\u0080-\u00ff]*$/u.test(text);
}

function objectIn(line: string): Readonly<Record<string, unknown>> | undefined {
  try {
    const value: unknown = JSON.parse(line);
    return typeof value === 'object' && value !== null ? (value as Record<string, unknown>) : undefined;
  } catch {
    return undefined;
  }
}
