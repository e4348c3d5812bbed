/**
 * A text with whatever would break a line, steer a terminal or hide itself (controls, formats, lone
 * surrogates) written as an escape: `\u001b`. What a record says comes from files and instruments, and a
 * record may come from anywhere.
 */
export function printable(text: string): string {
  return text.replace(
    /[\p{Cc}\p{Cf}\p{Cs}\u2028\u2029]/gu,
    (unit) => `\\u${(unit.codePointAt(0) ?? 0).toString(16).padStart(4, '0')}`,
  );
}

/** Plain data with every text in it made printable; what is neither list nor plain object stays as it is. */
export function printableData<T>(data: T): T {
  if (typeof data === 'string') return printable(data) as T;
  if (Array.isArray(data)) return data.map(printableData) as T;
  if (data === null || typeof data !== 'object' || Object.getPrototypeOf(data) !== Object.prototype)
    return data;
  return Object.fromEntries(Object.entries(data).map(([key, value]) => [key, printableData(value)])) as T;
}
