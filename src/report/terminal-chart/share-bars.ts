import { wordWrap } from '../../quantity/word-wrap.js';
import type { Size } from './plot.js';

export interface ShareBar {
  readonly name: string;
  /** 1 is all of it. */
  readonly share: number;
  readonly says: string;
}

const leastBar = 8;

/** A bar for each, as long as its share of the longest; what it says beside it. No wider than asked. */
export function shareBars(
  title: string,
  bars: readonly ShareBar[],
  { width, unicode }: Pick<Size, 'width' | 'unicode'>,
): readonly string[] {
  const known = bars.filter(({ share }) => Number.isFinite(share) && share >= 0);
  const names = Math.max(0, ...known.map(({ name }) => name.length));
  const words = Math.max(0, ...known.map(({ says }) => says.length));
  const room = width - names - words - 4;
  const most = Math.max(...known.map(({ share }) => share));
  if (known.length === 0 || room < leastBar || !(most > 0)) return [];
  const full = unicode ? '█' : '#';
  return [
    ...wordWrap(title, width).split('\n'),
    ...known.map(({ name, share, says }) => {
      const bar = full.repeat(Math.round((share / most) * room)).padEnd(room);
      return `${name.padEnd(names)}  ${bar}  ${says.padStart(words)}`;
    }),
  ].filter((line) => line.length <= width);
}
