import { cutText } from '../quantity/cut-text.js';

/** Of what a module's file says of it, as far as it is repeated. Chosen, no published source. */
const longest = 200;

/** A text of a module's file that stays a line or two wherever it is shown; says where it was cut. */
export function shortened(text: string): string {
  if (text.length <= longest) return text;
  return `${cutText(text, longest).trimEnd()}… (shortened; the record has all of it)`;
}
