/**
 * JSON for people and programs: indented, one newline at the end. What JSON leaves as it is but a terminal
 * may act on or hide (controls above ASCII, formats, line separators) is escaped, which changes no value.
 */
export function jsonText(data: unknown): string {
  const text = JSON.stringify(data, null, 2).replace(/[\u007f-\u009f\u2028\u2029\p{Cf}]/gu, (character) =>
    Array.from({ length: character.length }, (_, index) => character.charCodeAt(index))
      .map((unit) => `\\u${unit.toString(16).padStart(4, '0')}`)
      .join(''),
  );
  return `${text}\n`;
}
