import { StandardError } from './errors.js';

/** One node of a command tree as the standard prints it. */
interface Node {
  readonly short: string;
  readonly long: string;
  /** In brackets: may be left out. */
  readonly isDefault: boolean;
  /** How many there are; 0 where the node takes no number. */
  readonly count: number;
}

export type Header = readonly Node[];

/**
 * A header as the standards print it: capitals are the short form, brackets mark a default node, and `<4>` says
 * that there are four, of which the first needs no number (SCPI-99, volume 1, 6.2).
 * @example header('[SOURce:]CURRent[:LEVel][:IMMediate][:AMPLitude]'); header('OUTPut<2>[:STATe]')
 */
export function header(printed: string): Header {
  return [...printed.matchAll(/(\[)?:?([^:[\]]+):?\]?/g)].map(([, bracket, name = '']): Node => {
    const [, word, count = '0'] = /^(\*?[A-Za-z]+)(?:<(\d+)>)?$/.exec(name) ?? [];
    if (word === undefined) throw new Error(`no header is printed as ${printed}`);
    return {
      short: word.replace(/[a-z]/g, ''),
      long: word.toUpperCase(),
      isDefault: bracket !== undefined,
      count: Number(count),
    };
  });
}

/**
 * The numbers of the nodes that have one, where the words mean this header; undefined where they do not. Only the
 * short and the long form are meant, in any case, and nothing between (6.2.1).
 * @throws StandardError -114 where the words mean it but for a number that is not there
 */
export function numbersIn(nodes: Header, words: readonly string[]): readonly number[] | undefined {
  const [node, ...later] = nodes;
  if (node === undefined) return words.length === 0 ? [] : undefined;
  const [word, ...others] = words;
  const number = word === undefined ? undefined : numberOf(node, word.toUpperCase());
  if (number !== undefined) {
    const rest = numbersIn(later, others);
    if (rest !== undefined) {
      if (number < 1 || number > Math.max(1, node.count)) throw new StandardError(-114);
      return node.count > 0 ? [number, ...rest] : rest;
    }
  }
  if (!node.isDefault) return undefined;
  const rest = numbersIn(later, words);
  return rest === undefined || node.count === 0 ? rest : [1, ...rest];
}

/** The number behind a word that names this node; 1 where it has none. */
function numberOf({ short, long, count }: Node, word: string): number | undefined {
  for (const form of [long, short]) {
    if (word === form) return 1;
    const digits = word.startsWith(form) ? word.slice(form.length) : '';
    if (count > 0 && /^\d+$/.test(digits)) return Number(digits);
  }
  return undefined;
}
