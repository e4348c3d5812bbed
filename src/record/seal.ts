import { createHash, type Hash } from 'node:crypto';

/**
 * A seal is the SHA-256 of every byte of the journal before its line, and of the line without the seal.
 * It ends its line as `,"seal":"<64 hex digits>"}`, so it can be found without parsing.
 */
const opening = ',"seal":"';
const closing = '"}';
export const sealLength = opening.length + 64 + closing.length;
const openingBytes = Buffer.from(opening);
const sealAtEnd = /^.,"seal":"[0-9a-f]{64}"\}$/s;

export function newSealer(): Hash {
  return createHash('sha256');
}

/** The line with its seal, given the hash of all that went before. `line` is a JSON object. */
export function sealLine(before: Hash, line: string): string {
  const seal = before.copy().update(line).digest('hex');
  return `${line.slice(0, -1)}${opening}${seal}${closing}`;
}

/** Whether a line among these bytes, from `start` to `end`, ends in a seal. */
export function isSealed(bytes: Buffer, start = 0, end = bytes.length): boolean {
  const from = end - sealLength;
  return from > start && openingBytes.every((byte, index) => bytes[from + index] === byte);
}

/** Whether the text of a line ends in a seal. */
export function endsInSeal(line: string): boolean {
  return sealAtEnd.test(line.slice(-sealLength - 1));
}

/** Whether the seal of a sealed line agrees with all that went before. */
export function sealHolds(before: Hash, line: Buffer): boolean {
  const start = line.length - sealLength;
  const seal = line.toString('latin1', start + opening.length, line.length - closing.length);
  return before.copy().update(line.subarray(0, start)).update('}').digest('hex') === seal;
}
