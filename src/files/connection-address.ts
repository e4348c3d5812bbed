import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import { shown } from '../quantity/shown-text.js';
import type { ConnectionAddress, SerialSettings } from './bench.js';
import { namePattern } from './name-pattern.js';
import { didYouMean } from '../quantity/nearest.js';

/** A text that names no way to an instrument; in a file, what is wrong with the file. */
export class AddressError extends RailproofError {
  readonly code = 'ADDRESS';
  readonly exitCode = exitCodes.usage;
  readonly address: string;

  constructor(message: string, address: string) {
    super(message, { advice: `Ways to connect: ${addressForms.join(', ')}.` });
    this.address = address;
  }
}

/** The line that an instrument is spoken to over, however it is set; undefined where two would be in nobody's way. */
export function lineOf(address: ConnectionAddress): string | undefined {
  if (address.kind === 'tcp') return `tcp://${address.host}:${address.port}`;
  return address.kind === 'serial' ? `serial:${address.path}` : undefined;
}

/** One example of each form of address. */
export const addressForms = [
  'tcp://127.0.0.1:5025',
  'serial:/dev/ttyUSB0?baud=9600&data=8&parity=none&stop=1&flow=none',
  'replay:dialogue.jsonl',
  'simulated:',
] as const;

/** What a serial line is set to where neither its address nor the driver says otherwise. */
export const serialDefaults: Omit<SerialSettings, 'dtr' | 'rts'> = {
  baud: 9600,
  data: 8,
  parity: 'none',
  stop: 1,
  flow: 'none',
};

const serialChoices = {
  data: ['7', '8'],
  parity: ['none', 'even', 'odd'],
  stop: ['1', '2'],
  flow: ['none', 'hardware', 'software'],
  dtr: ['on', 'off'],
  rts: ['on', 'off'],
} as const;
const serialOptions = ['baud', 'data', 'parity', 'stop', 'flow', 'dtr', 'rts'] as const;
export const slowestLine = 50;
export const fastestLine = 4_000_000;

/**
 * Reads the address of an instrument: `tcp://host:port`, `serial:path?baud=9600&…`, `replay:file.jsonl`,
 * `simulated:` or `simulated:<dialect>`.
 * @throws AddressError
 */
export function parseAddress(text: string): ConnectionAddress {
  const [, scheme, rest = ''] = /^([a-z]+):(.*)$/s.exec(text) ?? [];
  if (/[\p{Cc}\p{Cs}]/u.test(text) || text.length > 1000) {
    throw new AddressError(`found ${shown(text)}, which is no address`, text);
  }
  switch (scheme) {
    case 'tcp':
      return parseTcp(rest, text);
    case 'serial':
      return parseSerial(rest, text);
    case 'replay':
      if (rest === '') throw new AddressError('replay: needs a file: replay:dialogue.jsonl', text);
      return { kind: 'replay', file: rest };
    case 'simulated':
      if (rest === '') return { kind: 'simulated' };
      if (!namePattern.test(rest)) throw new AddressError(`${shown(rest)} is no name of a dialect`, text);
      return { kind: 'simulated', dialect: rest };
    case undefined:
      throw new AddressError(
        `found ${shown(text)}; an address is needed: ${addressForms[0]}, ${addressForms[3]}`,
        text,
      );
    default: {
      const hint = didYouMean(scheme, schemes) || `; one of ${schemes.join(', ')} is needed`;
      throw new AddressError(`no way to connect is called ${shown(scheme)}${hint}`, text);
    }
  }
}

/** The inverse of {@link parseAddress}. */
export function formatAddress(address: ConnectionAddress): string {
  switch (address.kind) {
    case 'tcp':
      return `tcp://${address.host.includes(':') ? `[${address.host}]` : address.host}:${address.port}`;
    case 'serial': {
      const options = serialOptions
        .filter((option) => address[option] !== undefined)
        .map((option) => `${option}=${address[option]}`);
      return `serial:${address.path}${options.length === 0 ? '' : `?${options.join('&')}`}`;
    }
    case 'replay':
      return `replay:${address.file}`;
    case 'simulated':
      return `simulated:${address.dialect ?? ''}`;
  }
}

const schemes = ['tcp', 'serial', 'replay', 'simulated'];

function parseTcp(rest: string, text: string): ConnectionAddress {
  const [, bracketed, plain, portText] =
    /^\/\/(?:\[([0-9A-Fa-f:.%\w]+)\]|([A-Za-z0-9._-]+))(?::(\d{1,5}))?$/.exec(rest) ?? [];
  const host = bracketed ?? plain;
  if (host === undefined) throw new AddressError(`found ${shown(text)}; needed: tcp://host:port`, text);
  if (portText === undefined) throw new AddressError(`${shown(text)} lacks its port: ${text}:5025`, text);
  const port = Number(portText);
  if (port < 1 || port > 65535) throw new AddressError(`port ${portText} is not within 1 to 65535`, text);
  return { kind: 'tcp', host, port };
}

function parseSerial(rest: string, text: string): ConnectionAddress {
  const [path = '', query] = splitOnce(rest, '?');
  if (path === '') throw new AddressError('serial: needs a port: serial:/dev/ttyUSB0?baud=9600', text);
  const given = new Map<string, string>();
  for (const part of query === undefined || query === '' ? [] : query.split('&')) {
    const [option = '', value = ''] = splitOnce(part, '=');
    if (!serialOptions.some((known) => known === option)) {
      const hint = didYouMean(option, serialOptions) || `; known are ${serialOptions.join(', ')}`;
      throw new AddressError(`a serial line has no option ${shown(option)}${hint}`, text);
    }
    if (given.has(option)) throw new AddressError(`the option '${option}' is given twice`, text);
    given.set(option, value);
  }
  const settings = [...given].map(([option, value]) => [option, settingOf(option, value, text)] as const);
  return { kind: 'serial', path, ...(Object.fromEntries(settings) as Partial<SerialSettings>) };
}

function settingOf(option: string, value: string, text: string): string | number {
  if (option === 'baud') return baudRate(value, text);
  const choices: readonly string[] = serialChoices[option as keyof typeof serialChoices];
  if (choices.includes(value)) return /^\d$/.test(value) ? Number(value) : value;
  const hint = didYouMean(value, choices) || `; ${choices.join(' or ')} is needed`;
  throw new AddressError(`${option}=${value} is not known${hint}`, text);
}

function baudRate(given: string, text: string): number {
  const baud = /^\d{1,7}$/.test(given) ? Number(given) : Number.NaN;
  if (baud >= slowestLine && baud <= fastestLine) return baud;
  throw new AddressError(
    `baud=${given} will not do; a speed from ${slowestLine} to ${fastestLine} is needed`,
    text,
  );
}

function splitOnce(text: string, mark: string): [string] | [string, string] {
  const at = text.indexOf(mark);
  return at < 0 ? [text] : [text.slice(0, at), text.slice(at + mark.length)];
}
