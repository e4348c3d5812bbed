/** Of what a module's file says of it, as far as it is repeated. Chosen, no published source. */
const longest = 200;

/** A text of a module's file that stays a line or two wherever it is shown; says where it was cut. */
export function shortened(text: string): string {
  return text.length > longest ? `${text.slice(0, longest).trimEnd()}… (shortened)` : text;
}
