/** One unit of a program message: `CURR:LEV 2.5 A` or `MEAS:VOLT?`. */
export interface MessageUnit {
  /** Began with a colon: counted from the root, whatever came before. */
  readonly absolute: boolean;
  readonly nodes: readonly string[];
  readonly query: boolean;
  readonly parameters: readonly string[];
}

/**
 * Takes a program message apart at its semicolons (IEEE 488.2, 7.3). Empty units are allowed and mean nothing;
 * undefined stands for what cannot be read as a unit.
 */
export function unitsOf(message: string): readonly (MessageUnit | undefined)[] {
  return splitOutsideQuotes(message, ';')
    .map((text) => text.trim())
    .filter((text) => text !== '')
    .map(unitOf);
}

function unitOf(text: string): MessageUnit | undefined {
  const [, colon, header, mark, rest = ''] = /^(:)?(\*?[A-Za-z][\w:]*)(\?)?(?:\s+(.*))?$/s.exec(text) ?? [];
  if (header === undefined) return undefined;
  return {
    absolute: colon !== undefined,
    nodes: header.split(':'),
    query: mark !== undefined,
    parameters: rest.trim() === '' ? [] : splitOutsideQuotes(rest, ',').map((parameter) => parameter.trim()),
  };
}

function splitOutsideQuotes(text: string, separator: string): string[] {
  const parts: string[] = [];
  let begin = 0;
  let quote: string | undefined;
  for (let index = 0; index < text.length; index++) {
    const character = text[index];
    if (quote !== undefined) {
      if (character === quote) quote = undefined;
    } else if (character === '"' || character === "'") {
      quote = character;
    } else if (character === separator) {
      parts.push(text.slice(begin, index));
      begin = index + 1;
    }
  }
  return [...parts, text.slice(begin)];
}
