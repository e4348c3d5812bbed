import { readFromText, type TextSchema } from './building-blocks.js';
import { type Expression, expression, ExpressionError } from './expression.js';
import { found } from './plain-words.js';
import { shown } from '../quantity/shown-text.js';

/** A regular expression in a driver, which must have these named groups. */
export function regularExpression(
  description: string,
  groups: readonly string[] = [],
): TextSchema<Expression> {
  const meta = { description, examples: groups.includes('value') ? ['(?<value>[-+0-9.Ee]+)'] : ['^(1|ON)$'] };
  return readFromText(meta, 'a regular expression is needed', (value) => {
    if (typeof value !== 'string') {
      throw new ExpressionError(`${found(value)}; a regular expression, as a text in quotes, is needed`);
    }
    const read = expression(value);
    const lacking = groups.find((group) => !read.hasGroup(group));
    if (lacking !== undefined)
      throw new ExpressionError(`${shown(value)} lacks a group named '${lacking}': (?<${lacking}>…)`);
    return read;
  });
}
