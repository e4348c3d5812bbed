/** Of what a module's file says of it, as far as it is repeated. Chosen, no published source. */
const longest = 200;

/** A text of a module's file that stays a line or two wherever it is shown; says where it was cut, never through a sign. */
export function shortened(text: string): string {
  if (text.length <= longest) return text;
  const isHalf = /[\uD800-\uDBFF]$/.test(text.slice(0, longest));
  return `${text.slice(0, isHalf ? longest - 1 : longest).trimEnd()}… (shortened; the record has all of it)`;
}
