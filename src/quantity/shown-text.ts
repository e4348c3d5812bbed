/**
 * A text as messages quote it: in single quotes, cut when long, and with whatever would break a line,
 * steer a terminal or hide itself (controls, formats, lone surrogates) written as an escape.
 */
export function shown(text: string): string {
  const cut = text.length > longest ? `${text.slice(0, longest)}…` : text;
  const escaped = cut.replace(/[\p{Cc}\p{Cf}\p{Cs}\u2028\u2029]/gu, (unit) => {
    return `\\u${unit.charCodeAt(0).toString(16).padStart(4, '0')}`;
  });
  return `'${escaped}'`;
}

const longest = 60;
