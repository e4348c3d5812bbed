import type { Unit } from './program-message.js';

/**
 * The words of a unit counted from the root, and where the next unit is counted from: the node above the last
 * word. A common command is the same wherever it stands and leaves the path (SCPI-99, volume 1, 6.2.4).
 */
export function fromRoot(
  unit: Unit,
  path: readonly string[],
): { readonly words: readonly string[]; readonly path: readonly string[] } {
  if (unit.kind === 'common') return { words: unit.words, path };
  const words = unit.fromRoot ? unit.words : [...path, ...unit.words];
  return { words, path: words.slice(0, -1) };
}
