import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import { shown } from '../quantity/shown-text.js';
import { readFromText, type TextSchema } from './building-blocks.js';
import { found } from './plain-words.js';

class ExpressionError extends RailproofError {
  readonly code = 'EXPRESSION';
  readonly exitCode = exitCodes.badFile;
}

/** Replies are short, and so are the expressions that read them; a long one is a mistake or worse. */
const longestExpression = 200;

/** A regular expression in a driver, which must have these named groups. */
export function regularExpression(description: string, groups: readonly string[] = []): TextSchema<RegExp> {
  const meta = { description, examples: groups.includes('value') ? ['(?<value>[-+0-9.Ee]+)'] : ['^(1|ON)$'] };
  return readFromText(meta, 'a regular expression is needed', (value) => {
    if (typeof value !== 'string') {
      throw new ExpressionError(`${found(value)}; a regular expression, as a text in quotes, is needed`);
    }
    if (value.length > longestExpression) {
      throw new ExpressionError(
        `found an expression of ${value.length} characters; at most ${longestExpression} are allowed`,
      );
    }
    const expression = compile(value);
    for (const group of groups) {
      if (groupsOf(value).has(group)) continue;
      throw new ExpressionError(`${shown(value)} lacks a group named '${group}': (?<${group}>…)`);
    }
    return expression;
  });
}

function compile(source: string): RegExp {
  try {
    return new RegExp(source);
  } catch (error) {
    const reason = error instanceof Error ? error.message.replace(/^.*: /, '').toLowerCase() : '';
    throw new ExpressionError(`${shown(source)} is no regular expression: ${reason}`, { cause: error });
  }
}

/** With an empty alternative anything matches, and the match lists every group that there is. */
function groupsOf(source: string): Set<string> {
  return new Set(Object.keys(new RegExp(`${source}|`).exec('')?.groups ?? {}));
}
