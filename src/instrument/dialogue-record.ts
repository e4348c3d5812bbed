import type { Seconds } from '../quantity/quantity.js';

interface At<Kind extends string> {
  readonly kind: Kind;
  readonly t: Seconds;
}

/** A connection was made, to that address. */
export type Opened = At<'opened'> & { readonly address: string };
/** None could be made. */
export type NotOpened = At<'unreachable' | 'busy'> & { readonly reason: string };
export type Sent = At<'sent'> & { readonly bytes: Uint8Array };
/** How long what was sent just before is still on its way out, where its port is slow. */
export type OutIn = At<'out-in'> & { readonly seconds: Seconds };
export type Received = At<'received'> & { readonly bytes: Uint8Array };
export type Lost = At<'lost'> & { readonly reason: string };
/**
 * How often nothing had come when it was looked for. It is there only where something came before anything more
 * was sent: then it tells at which look it came.
 */
export type Silent = At<'silent'> & { readonly times: number };

/** One thing that happened on a line. */
export type TraceEntry = Opened | NotOpened | Sent | OutIn | Received | Lost | Silent;

export type Trace = (entry: TraceEntry) => void;

export const dialogueFormat = 'railproof/dialogue 1';

/**
 * The file format of a recorded dialogue is JSON Lines: a first line that names the format and the address,
 * then a line for each thing that happened: `{"t":0.1,"sent":"*IDN?\n"}`. Text is Latin-1, one character a
 * byte, so every byte survives, and JSON keeps every digit of a time. Behind what was sent over a slow port stands
 * for how many more seconds it was on its way: `{"t":0.1,"out-in":0.0125}`. Times are in seconds: those of the
 * dialogue itself, or, from the first `opened` or `unreachable` on, those of a run, which all its dialogues share.
 */
export function dialogueHeader(address: string): string {
  return `${JSON.stringify({ format: dialogueFormat, address })}\n`;
}

export function dialogueLine(entry: TraceEntry): string {
  const { t, kind } = entry;
  return `${JSON.stringify({ t, [kind]: contentOf(entry) })}\n`;
}

function contentOf(entry: TraceEntry): string | number {
  switch (entry.kind) {
    case 'sent':
    case 'received':
      return Buffer.from(entry.bytes).toString('latin1');
    case 'opened':
      return entry.address;
    case 'unreachable':
    case 'busy':
    case 'lost':
      return entry.reason;
    case 'out-in':
      return entry.seconds;
    case 'silent':
      return entry.times;
  }
}

/** The address named by the first line, or undefined when that is not what the line is. */
export function readDialogueHeader(line: string): string | undefined {
  const header = objectIn(line);
  return header?.['format'] === dialogueFormat && typeof header['address'] === 'string'
    ? header['address']
    : undefined;
}

/** One line after the first, or undefined when it is not in the format. */
export function readDialogueLine(line: string): TraceEntry | undefined {
  const { t, ...others } = objectIn(line) ?? {};
  const [content, ...more] = Object.entries(others);
  if (typeof t !== 'number' || !Number.isFinite(t) || content === undefined || more.length > 0)
    return undefined;
  const [kind, value] = content;
  return typeof value === 'string' ? entryOfText(t, kind, value) : entryOfNumber(t, kind, value);
}

function entryOfText(t: Seconds, kind: string, text: string): TraceEntry | undefined {
  switch (kind) {
    case 'sent':
    case 'received':
      return isLatin1(text) ? { t, kind, bytes: Buffer.from(text, 'latin1') } : undefined;
    case 'opened':
      return { t, kind, address: text };
    case 'unreachable':
    case 'busy':
    case 'lost':
      return { t, kind, reason: text };
    default:
      return undefined;
  }
}

function entryOfNumber(t: Seconds, kind: string, value: unknown): TraceEntry | undefined {
  if (typeof value !== 'number' || !Number.isFinite(value) || value <= 0) return undefined;
  if (kind === 'out-in') return { t, kind, seconds: value };
  return kind === 'silent' && Number.isSafeInteger(value) ? { t, kind, times: value } : undefined;
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
