const longest = 80;

/**
 * Bytes or text as one short line that a person can read: control characters and everything beyond plain
 * ASCII are escaped (`\r`, `\n`, `\x07`), and what is longer than 80 characters is cut and its length told.
 */
export function visible(what: Uint8Array | string): string {
  const length = what.length;
  const text =
    typeof what === 'string'
      ? what.slice(0, longest + 1)
      : Buffer.from(what.buffer, what.byteOffset, Math.min(length, longest + 1)).toString('latin1');
  let shown = '';
  for (const character of text) {
    const next = escaped(character);
    if (shown.length + next.length > longest) return `${shown}… (${length} bytes)`;
    shown += next;
  }
  return shown;
}

function escaped(character: string): string {
  if (character >= ' ' && character <= '~') return character;
  switch (character) {
    case '\r':
      return '\\r';
    case '\n':
      return '\\n';
    case '\t':
      return '\\t';
    default: {
      const code = character.codePointAt(0) ?? 0;
      return code <= 0xff ? `\\x${code.toString(16).padStart(2, '0')}` : `\\u{${code.toString(16)}}`;
    }
  }
}
