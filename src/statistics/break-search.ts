import {
  cutInStretches,
  leastSquares,
  momentsKept,
  type LevelledPoints,
  type Stretches,
} from './stretches.js';

/** The best split so far, and how much of the sum of squares of the heights its broken line explains. */
interface Leader {
  split: number | undefined;
  explains: number;
}

/** Count of some points, and their sums of distance d from one end of the data and height h. */
interface Part {
  readonly count: number;
  readonly d: number;
  readonly h: number;
  readonly dd: number;
  readonly dh: number;
}

/**
 * Finds where to split points, sorted by x, so that a continuous line of two pieces fits them best, with
 * its break somewhere from the last point of the left part to the first of the right part. A split is
 * the number of points in the left part; `first` to `last` are allowed, and both parts must hold two
 * different x at each. `undefined` when there is no gap among them. What the overall line leaves is added,
 * because it comes for nothing.
 *
 * For each gap between neighbouring x the optimum has a closed form. With the two parts fitted apart the
 * sum of squares is the least that any break in the gap can reach, and it is reached when the two lines
 * cross in the gap. Otherwise it is Q(ψ) = Q_apart + g(ψ)²/v(ψ), g being the step between the two lines at ψ
 * and v its variance for unit scatter; that has no minimum but at the crossing, so the best break lies at
 * one end of the gap. (The two cases are in D. J. Hudson, J. Amer. Statist. Assoc. 61 (1966); from memory.)
 *
 * Exact and linear: running sums give every gap in constant time. Most gaps need no look: leaving points
 * out never makes a sum of squares larger, so the parts beside a stretch of about √n points bound all the
 * splits in it. Where there is no break at all nothing is ruled out, and the whole fit takes about
 * twice as long.
 */
export function bestSplit(
  points: LevelledPoints,
  first: number,
  last: number,
): { readonly split: number | undefined; readonly sumOfSquaresOfLine: number } {
  const length = Math.min(1024, Math.max(16, Math.ceil(Math.sqrt(points.x.length))));
  const stretches = cutInStretches(points, stretchBorders(first, last, length));
  const least = leastSumsOfSquares(stretches);
  const rightSide = new Float64Array(5 * (length + 1));
  const leader: Leader = { split: undefined, explains: -Infinity };
  const all = stretches.sumAboutLevel;
  // A good leader at once rules out most of the rest; the margin is for the rounding of the sums.
  const hopeful = placeOfLeast(least);
  searchStretch(points, stretches, hopeful, rightSide, leader);
  for (let stretch = 0; stretch < least.length; stretch += 1) {
    if (stretch === hopeful || (least[stretch] as number) >= all - leader.explains + 1e-12 * all) continue;
    searchStretch(points, stretches, stretch, rightSide, leader);
  }
  return { split: leader.split, sumOfSquaresOfLine: stretches.sumOfSquares };
}

/** Splits at which one stretch ends and the next begins; both ends included, so neighbours share one. */
function stretchBorders(first: number, last: number, length: number): Int32Array {
  const borders = new Int32Array(Math.ceil((last - first) / length) + 1);
  for (let index = 0; index < borders.length; index += 1) {
    borders[index] = Math.min(first + index * length, last);
  }
  return borders;
}

/** The least sum of squares that any split of each stretch can reach. */
function leastSumsOfSquares({ borders, left, right }: Stretches): Float64Array {
  const least = new Float64Array(Math.max(1, borders.length - 1));
  for (let stretch = 0; stretch < least.length; stretch += 1) {
    const beyond = Math.min(stretch + 1, borders.length - 1);
    least[stretch] = leastSquares(left, momentsKept * stretch) + leastSquares(right, momentsKept * beyond);
  }
  return least;
}

function placeOfLeast(values: Float64Array): number {
  let least = 0;
  for (let index = 1; index < values.length; index += 1) {
    if ((values[index] as number) < (values[least] as number)) least = index;
  }
  return least;
}

/**
 * Looks at every split of one stretch and puts the best into `leader`, if it is better. Distances are
 * counted from the end of the data that a part touches: that keeps the sums of a short part exact.
 */
function searchStretch(
  points: LevelledPoints,
  { borders, left, right }: Stretches,
  stretch: number,
  rightSide: Float64Array,
  leader: Leader,
): void {
  const { x, y, meanX, meanY, slope } = points;
  const total = x.length;
  const from = borders[stretch] as number;
  const to = borders[Math.min(stretch + 1, borders.length - 1)] as number;
  const leftEnd = x[0] as number;
  const rightEnd = x[total - 1] as number;

  const beyond = momentsKept * Math.min(stretch + 1, borders.length - 1);
  let count = total - to;
  const meanQ = rightEnd - leftEnd - (right[beyond] as number);
  const meanBeyond = right[beyond + 1] as number;
  let d = count * meanQ;
  let h = count * meanBeyond;
  let dd = (right[beyond + 2] as number) + d * meanQ;
  let dh = d * meanBeyond - (right[beyond + 3] as number);
  for (let split = to, at = 5 * (to - from); ; at -= 5) {
    rightSide[at] = d;
    rightSide[at + 1] = h;
    rightSide[at + 2] = dd;
    rightSide[at + 3] = dh;
    rightSide[at + 4] = explained(count, d, h, dd, dh);
    if (split === from) break;
    split -= 1;
    count += 1;
    const place = x[split] as number;
    const distance = rightEnd - place;
    const height = (y[split] as number) - meanY - slope * (place - meanX);
    d += distance;
    h += height;
    dd += distance * distance;
    dh += distance * height;
  }

  const before = momentsKept * stretch;
  const meanD = left[before] as number;
  const meanBefore = left[before + 1] as number;
  d = from * meanD;
  h = from * meanBefore;
  dd = (left[before + 2] as number) + d * meanD;
  dh = (left[before + 3] as number) + d * meanBefore;
  for (let split = from, at = 0; split <= to; split += 1, at += 5) {
    const place = x[split] as number;
    const apart = explained(split, d, h, dd, dh) + (rightSide[at + 4] as number);
    if (apart > leader.explains && (x[split - 1] as number) < place) {
      const own = { count: split, d, h, dd, dh };
      const explains = apart - lossByJoining(x, own, partAt(rightSide, at, total - split));
      if (explains > leader.explains) {
        leader.explains = explains;
        leader.split = split;
      }
    }
    const distance = place - leftEnd;
    const height = (y[split] as number) - meanY - slope * (place - meanX);
    d += distance;
    h += height;
    dd += distance * distance;
    dh += distance * height;
  }
}

function partAt(sums: Float64Array, at: number, count: number): Part {
  return {
    count,
    d: sums[at] as number,
    h: sums[at + 1] as number,
    dd: sums[at + 2] as number,
    dh: sums[at + 3] as number,
  };
}

/** How much of Σh² the line through some points explains, from their count and sums. */
function explained(count: number, d: number, h: number, dd: number, dh: number): number {
  const share = 1 / count;
  const spread = dh - d * h * share;
  return h * h * share + (spread * spread) / (dd - d * d * share);
}

/** What the sum of squares grows by when the lines through both parts are made to meet in the gap between. */
function lossByJoining(x: Float64Array, own: Part, far: Part): number {
  const before = (x[own.count - 1] as number) - (x[0] as number);
  const after = (x[own.count] as number) - (x[0] as number);
  const spread = own.dd - (own.d * own.d) / own.count;
  const farSpread = far.dd - (far.d * far.d) / far.count;
  const slope = (own.dh - (own.d * own.h) / own.count) / spread;
  const farSlope = (far.dh - (far.d * far.h) / far.count) / farSpread;
  // How far the ends of the gap lie from the middle of each part, and the steps there.
  const middle = own.d / own.count;
  const farMiddle = (x[x.length - 1] as number) - (x[0] as number) - far.d / far.count;
  const level = own.h / own.count - far.h / far.count;
  const stepBefore = level + slope * (before - middle) - farSlope * (farMiddle - before);
  const stepAfter = level + slope * (after - middle) - farSlope * (farMiddle - after);
  if (stepBefore * stepAfter <= 0) return 0;
  const even = 1 / own.count + 1 / far.count;
  return Math.min(
    stepBefore ** 2 / (even + (before - middle) ** 2 / spread + (before - farMiddle) ** 2 / farSpread),
    stepAfter ** 2 / (even + (after - middle) ** 2 / spread + (after - farMiddle) ** 2 / farSpread),
  );
}
