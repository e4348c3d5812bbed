import { limitOf, type SupplyLine } from './supply-line.js';

/**
 * The largest current up to which what stands between a supply and an output turns no more than so much into
 * heat, at this current and at every smaller one: (V(I) − V_out)·I ≤ P. As V falls with I the product need not
 * rise all the way, so it is followed from 0 A up, corner by corner: along a straight piece V(I) = c + s·I + V_out
 * it first reaches P at
 *
 *     I = 2P / (c + √(c² + 4·s·P))
 *
 * V, A, W. The line's limit where it never does.
 * @param most above 0.
 */
export function currentWithin(line: SupplyLine, output: number, most: number): number {
  const { corners } = line;
  for (const [index, low] of corners.entries()) {
    const high = corners[index - 1];
    if (high === undefined || low.current <= high.current) continue;
    const slope = (low.voltage - high.voltage) / (low.current - high.current);
    const above = high.voltage - slope * high.current - output;
    const root = above ** 2 + 4 * slope * most;
    if (above <= 0 || root < 0) continue;
    const reached = (2 * most) / (above + Math.sqrt(root));
    // What lies before this piece was within, so it is reached here or not on this piece.
    if (reached <= low.current && reached >= high.current * (1 - arithmetic)) return reached;
  }
  return limitOf(line);
}

const arithmetic = 1e-9;
