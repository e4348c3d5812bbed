import {
  isMap,
  isNode,
  isScalar,
  isSeq,
  LineCounter,
  parseDocument,
  type Document,
  type Pair,
} from '../libraries/yaml.js';
import { BadFileError, type FileProblem } from './file-error.js';
import { largestFile, tooLarge } from './file-size.js';
import { limitProblem, nestsTooDeeply, repeatedKeys, unprintable } from './yaml-limits.js';
import { syntaxProblem, type TextProblem } from './yaml-syntax.js';

/** Something wrong with what a file says, before its place in the text has been looked up. */
export interface Complaint {
  readonly path: readonly PropertyKey[];
  /** The key in the map at `path` that is at fault, where it is the key and not a value. */
  readonly key?: string;
  readonly message: string;
}

/** A YAML file read into plain values, which still knows where each of them stands. */
export interface YamlDocument {
  readonly fileName: string;
  readonly value: unknown;
  /** The keys of the top level, in the order of the file. */
  readonly topKeys: readonly string[];
  place(complaint: Complaint): FileProblem;
}

/**
 * Reads YAML 1.2, core schema: one document, keys are texts and each stands once, no tags, few aliases.
 * @throws BadFileError with the places of what is wrong.
 */
export function parseYaml(text: string, fileName: string): YamlDocument {
  const source = text.startsWith('\ufeff') ? text.slice(1) : text;
  const lines = new LineCounter();
  const problemAt = (offset: number, path: string, message: string): FileProblem => {
    const { line, col } = lines.linePos(offset);
    return { file: fileName, line: Math.max(line, 1), column: Math.max(col, 1), path, message };
  };
  const refuse = (problems: readonly TextProblem[]): never => {
    throw new BadFileError(problems.map(({ offset, message }) => problemAt(offset, '', message)));
  };

  if (source.length > largestFile) return refuse([{ offset: 0, message: tooLarge }]);
  const unread = unprintable(source) ?? nestsTooDeeply(source);
  if (unread !== undefined) {
    lines.addNewLine(0);
    for (let end = source.indexOf('\n'); end >= 0; end = source.indexOf('\n', end + 1))
      lines.addNewLine(end + 1);
    return refuse([unread]);
  }
  const document = parseDocument(source, {
    version: '1.2',
    schema: 'core',
    stringKeys: true,
    // The parser compares each key with all others; ours is looked at once, see `repeatedKeys`.
    uniqueKeys: false,
    merge: false,
    prettyErrors: false,
    lineCounter: lines,
    // 'silent' would also keep quiet about a second document.
    logLevel: 'error',
  });
  const problem = syntaxProblem(document) ?? limitProblem(document);
  if (problem !== undefined) return refuse([problem]);
  const repeated = repeatedKeys(document);
  if (repeated.length > 0) return refuse(repeated);

  return {
    fileName,
    // The aliases have been counted above, by what they expand to and not by how many they are.
    value: document.toJS({ maxAliasCount: -1 }),
    topKeys: isMap(document.contents) ? document.contents.items.map(keyText) : [],
    place: ({ path, key, message }) =>
      problemAt(offsetOf(document, path, key), path.map(String).join('.'), message),
  };
}

/** Follows the path as far as it goes: what is missing is told at the map in which it is missing. */
function offsetOf(document: Document, path: readonly PropertyKey[], key: string | undefined): number {
  let node: unknown = document.contents;
  let offset = startOf(node) ?? 0;
  const steps = key === undefined ? path : [...path, key];
  for (const [index, part] of steps.entries()) {
    const pair = isMap(node) ? node.items.find((item) => keyText(item) === String(part)) : undefined;
    const next: unknown = pair === undefined && isSeq(node) ? node.items[Number(part)] : pair?.value;
    if (pair === undefined && next === undefined) break;
    const atKey = key !== undefined && index === steps.length - 1;
    const isWritten = !atKey && !(pair !== undefined && isEmpty(next));
    offset = (isWritten ? startOf(next) : undefined) ?? startOf(pair?.key) ?? offset;
    node = next;
  }
  return offset;
}

/** The value of a key that has nothing after its colon. */
function isEmpty(node: unknown): boolean {
  return isScalar(node) && node.range !== undefined && node.range !== null && node.range[0] === node.range[1];
}

function startOf(node: unknown): number | undefined {
  return isNode(node) ? node.range?.[0] : undefined;
}

function keyText(pair: Pair): string {
  return isScalar(pair.key) ? String(pair.key.value) : String(pair.key);
}
