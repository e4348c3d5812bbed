/**
 * A text with whatever would break a line, steer a terminal or hide itself (controls, formats, lone
 * surrogates) written as an escape: `\u001b`. What a record says comes from files and instruments, and a
 * record may come from anywhere; names of files and folders may hold anything too.
 */
export function printable(text: string): string {
  return text.replace(
    /[\p{Cc}\p{Cf}\p{Cs}\u2028\u2029]/gu,
    (unit) => `\\u${(unit.codePointAt(0) ?? 0).toString(16).padStart(4, '0')}`,
  );
}

/** The same for a text of several lines, which stay lines. */
export function printableLines(text: string): string {
  return text.split('\n').map(printable).join('\n');
}
