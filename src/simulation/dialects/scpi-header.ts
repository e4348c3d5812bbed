/**
 * A header as a manual prints it: `INPut[:STATe]`. Capitals are the short form, the whole is the long form,
 * brackets mark a node that may be left out (SCPI-99, volume 1, 5 and 6.2).
 */
export interface HeaderPattern {
  readonly nodes: readonly HeaderNode[];
}

export interface HeaderNode {
  readonly short: string;
  readonly long: string;
  readonly needed: boolean;
}

/** @example headerPattern('CURRent[:LEVel]') */
export function headerPattern(printed: string): HeaderPattern {
  const nodes = [...printed.matchAll(/(\[)?:?(\*?[A-Za-z]+):?\]?/g)].map(([, bracket, name = '']) => ({
    short: name.replace(/[a-z]+/g, ''),
    long: name.toUpperCase(),
    needed: bracket === undefined,
  }));
  return { nodes };
}

/** Whether these nodes, as they came over the wire, mean the pattern: only short or long form, in any case. */
export function matchesHeader({ nodes }: HeaderPattern, spoken: readonly string[]): boolean {
  const fits = (pattern: number, word: number): boolean => {
    const node = nodes[pattern];
    if (node === undefined) return word === spoken.length;
    const heard = spoken[word]?.toUpperCase();
    if (heard !== undefined && (heard === node.short || heard === node.long) && fits(pattern + 1, word + 1))
      return true;
    return !node.needed && fits(pattern + 1, word);
  };
  return spoken.length <= nodes.length && fits(0, 0);
}
