import {
  isAlias,
  isCollection,
  isNode,
  isPair,
  isScalar,
  visit,
  type Document,
  type Node,
} from '../libraries/yaml.js';
import { shown } from '../quantity/shown-text.js';
import type { TextProblem } from './yaml-syntax.js';

/** As many values as any file of ours could hold, aliases expanded. */
export const mostValues = 20_000;
const deepest = 64;

/**
 * Looks for a character that steers a terminal or turns the direction of the text, as no YAML and no text of
 * ours holds it: files are shown to people, comments and all, and what they see must be what is there.
 */
export function unprintable(source: string): TextProblem | undefined {
  const found = /(?![\t\n\r\u0085])\p{Cc}|[\p{Cs}\u2028-\u202e\u2066-\u2069\ufffe\uffff]/u.exec(source);
  if (found === null) return undefined;
  const code = (found[0].codePointAt(0) ?? 0).toString(16).toUpperCase().padStart(4, '0');
  return { offset: found.index, message: `a character stands here that cannot be shown (U+${code})` };
}

/**
 * Looks for nesting that no file of ours has, before the parser, which recurses, sees the text. Brackets
 * in quoted texts count too; they are closed again, so they do no harm.
 */
export function nestsTooDeeply(source: string): TextProblem | undefined {
  const compact = /(?:[-?:][ \t]+){64}/.exec(source);
  if (compact !== null) return { offset: compact.index, message: 'nested too deeply' };
  let depth = 0;
  for (let offset = 0; offset < source.length; offset += 1) {
    const unit = source[offset];
    if (unit === '[' || unit === '{') depth += 1;
    else if (unit === ']' || unit === '}') depth = Math.max(0, depth - 1);
    if (depth > deepest) return { offset, message: 'nested too deeply' };
  }
  return undefined;
}

/**
 * Refuses tags, aliases that lead nowhere or into themselves, and aliases that expand to more values than
 * any file could hold (the alias bomb). Each anchor is sized once, so the cost is linear in the text.
 */
export function limitProblem(document: Document): TextProblem | undefined {
  const sizes = new Map<string, number>();
  const open = new Set<string>();
  let problem: TextProblem | undefined;
  let total = 0;

  const report = (node: Node, message: string): number => {
    problem ??= { offset: node.range?.[0] ?? 0, message };
    return 0;
  };
  const sizeOf = (node: unknown): number => {
    if (problem !== undefined) return 0;
    if (isPair(node)) return sizeOf(node.key) + sizeOf(node.value);
    if (!isNode(node)) return 0;
    if (isAlias(node)) {
      if (open.has(node.source)) return report(node, `the alias '*${node.source}' leads into itself`);
      const size = sizes.get(node.source);
      if (size === undefined) return report(node, `no anchor '&${node.source}' stands before this alias`);
      total += size;
      if (total > mostValues) return report(node, 'the aliases up to here expand to too many values');
      return size;
    }
    if (node.tag !== undefined) return report(node, `tags are not read here; found one before this value`);
    const anchor = isScalar(node) || isCollection(node) ? node.anchor : undefined;
    if (anchor !== undefined) open.add(anchor);
    let size = 1;
    if (isCollection(node)) for (const item of node.items) size += sizeOf(item);
    total += 1;
    if (total > mostValues) return report(node, 'more values than any file of this kind needs');
    if (anchor !== undefined) {
      open.delete(anchor);
      sizes.set(anchor, size);
    }
    return size;
  };
  sizeOf(document.contents);
  return problem;
}

/** Keys that stand twice in one map; each is told at its second place. */
export function repeatedKeys(document: Document): TextProblem[] {
  const problems: TextProblem[] = [];
  visit(document, {
    Map: (_, map) => {
      const seen = new Set<unknown>();
      for (const { key } of map.items) {
        if (!isScalar(key)) continue;
        if (seen.has(key.value)) {
          const message = `the key ${shown(String(key.value))} stands here a second time`;
          problems.push({ offset: key.range?.[0] ?? 0, message });
        }
        seen.add(key.value);
      }
    },
  });
  return problems;
}
