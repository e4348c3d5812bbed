import type { Made } from '../report/page/page.js';
import { packageFacts } from './package-facts.js';

/** Who makes a page, for its last line. */
export function madeAt(date: Date): Made {
  const { name, version } = packageFacts();
  return { program: `${name} ${version}`, date };
}
