import { ScpiErrorNumber } from './scpi-errors.js';

/** The highest channel of any card. */
const HIGHEST = 9999;
/** A range may not make more of them than a rack has. */
const MOST = 1000;

/**
 * A channel list, `(@101)`, `(@101,103)` or `(@101:104)` (SCPI-99, volume 1, 8.3.2; from memory). An error is
 * the negative number that goes on the queue.
 */
export function channelList(text: string): { channels: readonly number[] } | { error: number } {
  const [, inner] = /^\(\s*@([\d\s,:]*)\)$/.exec(text.trim()) ?? [];
  if (inner === undefined) return { error: ScpiErrorNumber.dataType };
  if (inner.trim() === '') return { channels: [] };
  const channels: number[] = [];
  for (const part of inner.split(',')) {
    const [, first, last = first] = /^\s*(\d{1,6})\s*(?::\s*(\d{1,6})\s*)?$/.exec(part) ?? [];
    if (first === undefined || last === undefined) return { error: ScpiErrorNumber.dataType };
    const [from, to] = [Number(first), Number(last)];
    if (from < 1 || to > HIGHEST || to < from || to - from >= MOST)
      return { error: ScpiErrorNumber.outOfRange };
    for (let channel = from; channel <= to; channel += 1) channels.push(channel);
  }
  return { channels };
}

/** As an instrument writes the list of its channels. */
export function channelListText(channels: readonly number[]): string {
  return `(@${channels.join(',')})`;
}
