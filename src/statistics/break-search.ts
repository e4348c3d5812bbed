import { endSums, explained, sumsKept, type EndSums, type LevelledPoints } from './end-sums.js';

// Splits looked at one by one share their right-hand sums in stretches of about √n, and are ruled out
// together in groups of this many.
const groupSize = 4;

/** The best split so far, and how much of Σh² its broken line explains. */
interface Leader {
  split: number | undefined;
  explains: number;
}

/**
 * Finds where to split points, sorted by x, so that a continuous line of two pieces fits them best, with
 * its break somewhere from the last point of the left part to the first of the right part. A split is
 * the number of points in the left part; `first` to `last` are allowed, and both parts must hold two
 * different x at each. `undefined` when there is no gap among them.
 *
 * For each gap between neighbouring x the optimum has a closed form. With the two parts fitted apart the
 * sum of squares is the least that any break in the gap can reach, and it is reached when the two lines
 * cross in the gap. Otherwise it is Q(ψ) = Q_apart + g(ψ)²/v(ψ), g being the step between the two lines at ψ
 * and v its variance for unit scatter; that has no minimum but at the crossing, so the best break lies at
 * one end of the gap. (The two cases are in D. J. Hudson, J. Amer. Statist. Assoc. 61 (1966) 1097–1129.)
 *
 * Exact and linear: running sums give every gap in constant time. Most gaps need no look: leaving
 * points out never makes a sum of squares larger, so the parts left and right of a whole stretch bound
 * all the splits in it.
 */
export function bestSplit(points: LevelledPoints, first: number, last: number): number | undefined {
  if (last < first) return undefined;
  const length = stretchLength(points.x.length);
  const sums = endSums(points, stretchBorders(first, last, length));
  const bounds = stretchBounds(sums, points.x.length);
  const room = new Float64Array(sumsKept * (length + 1));
  const leader: Leader = { split: undefined, explains: -Infinity };
  // A good leader at once rules out most of the rest.
  const hopeful = placeOfLargest(bounds);
  searchStretch(points, sums, hopeful, room, leader);
  for (let stretch = 0; stretch < bounds.length; stretch += 1) {
    if (stretch === hopeful || (bounds[stretch] as number) <= leader.explains) continue;
    searchStretch(points, sums, stretch, room, leader);
  }
  return leader.split;
}

function stretchLength(points: number): number {
  return Math.min(1024, Math.max(16, Math.ceil(Math.sqrt(points))));
}

/** Splits at which one stretch ends and the next begins; both ends included, so neighbours share one. */
function stretchBorders(first: number, last: number, length: number): Int32Array {
  const borders = new Int32Array(Math.max(1, Math.ceil((last - first) / length)) + 1);
  for (let index = 0; index < borders.length; index += 1) {
    borders[index] = Math.min(first + index * length, last);
  }
  return borders;
}

/** The most that any split of each stretch can explain, with a margin for the rounding of the sums. */
function stretchBounds({ borders, fromLeft, fromRight }: EndSums, points: number): Float64Array {
  const all = (fromLeft[4] as number) + (fromRight[4] as number);
  const bounds = new Float64Array(borders.length - 1);
  for (let stretch = 0; stretch < bounds.length; stretch += 1) {
    const left = sumsKept * stretch;
    const right = left + sumsKept;
    const between = all - (fromLeft[left + 4] as number) - (fromRight[right + 4] as number);
    bounds[stretch] =
      explainedBy(borders[stretch] as number, fromLeft, left) +
      explainedBy(points - (borders[stretch + 1] as number), fromRight, right) +
      between +
      1e-12 * all;
  }
  return bounds;
}

function placeOfLargest(values: Float64Array): number {
  let largest = 0;
  for (let index = 1; index < values.length; index += 1) {
    if ((values[index] as number) > (values[largest] as number)) largest = index;
  }
  return largest;
}

function explainedBy(count: number, sums: Float64Array, at: number): number {
  return explained(
    count,
    sums[at] as number,
    sums[at + 1] as number,
    sums[at + 2] as number,
    sums[at + 3] as number,
  );
}

/** Looks at the splits of one stretch and puts the best into `leader`, if it is better. */
function searchStretch(
  points: LevelledPoints,
  sums: EndSums,
  stretch: number,
  room: Float64Array,
  leader: Leader,
): void {
  const { x, y, meanX, meanY, slope } = points;
  const count = x.length;
  const from = sums.borders[stretch] as number;
  const to = sums.borders[stretch + 1] as number;
  const leftEnd = x[0] as number;
  const rightEnd = x[count - 1] as number;

  // Right-hand sums of every split, from the border back: room[5·(split − from)] and on.
  room.set(
    sums.fromRight.subarray(sumsKept * (stretch + 1), sumsKept * (stretch + 2)),
    sumsKept * (to - from),
  );
  for (let split = to - 1, at = sumsKept * (to - from - 1); split >= from; split -= 1, at -= sumsKept) {
    const place = x[split] as number;
    const distance = rightEnd - place;
    const height = (y[split] as number) - meanY - slope * (place - meanX);
    room[at] = (room[at + 5] as number) + distance;
    room[at + 1] = (room[at + 6] as number) + height;
    room[at + 2] = (room[at + 7] as number) + distance * distance;
    room[at + 3] = (room[at + 8] as number) + distance * height;
    room[at + 4] = (room[at + 9] as number) + height * height;
  }

  const own = new Float64Array(sumsKept);
  const first = sumsKept * stretch;
  let sumD = sums.fromLeft[first] as number;
  let sumH = sums.fromLeft[first + 1] as number;
  let sumDD = sums.fromLeft[first + 2] as number;
  let sumDH = sums.fromLeft[first + 3] as number;
  for (let group = from; group <= to; group += groupSize) {
    const groupEnd = Math.min(group + groupSize - 1, to);
    const farAt = sumsKept * (groupEnd - from);
    const between = (room[sumsKept * (group - from) + 4] as number) - (room[farAt + 4] as number);
    const bound =
      explained(group, sumD, sumH, sumDD, sumDH) + explainedBy(count - groupEnd, room, farAt) + between;
    if (bound > leader.explains) {
      own[0] = sumD;
      own[1] = sumH;
      own[2] = sumDD;
      own[3] = sumDH;
      searchGroup(points, group, groupEnd, own, room, from, leader);
    }
    for (let index = group; index <= groupEnd; index += 1) {
      const place = x[index] as number;
      const distance = place - leftEnd;
      const height = (y[index] as number) - meanY - slope * (place - meanX);
      sumD += distance;
      sumH += height;
      sumDD += distance * distance;
      sumDH += distance * height;
    }
  }
}

/**
 * Looks at a few neighbouring splits, one by one. `own` holds the left-hand sums at the first of them,
 * `room` the right-hand sums of all splits from `roomFrom` on.
 */
function searchGroup(
  { x, y, meanX, meanY, slope }: LevelledPoints,
  from: number,
  to: number,
  own: Float64Array,
  room: Float64Array,
  roomFrom: number,
  leader: Leader,
): void {
  const leftEnd = x[0] as number;
  const rightEnd = x[x.length - 1] as number;
  let sumD = own[0] as number;
  let sumH = own[1] as number;
  let sumDD = own[2] as number;
  let sumDH = own[3] as number;
  for (let split = from; split <= to; split += 1) {
    const before = x[split - 1] as number;
    const after = x[split] as number;
    const at = sumsKept * (split - roomFrom);
    const farCount = x.length - split;
    const apart = explained(split, sumD, sumH, sumDD, sumDH) + explainedBy(farCount, room, at);
    if (before < after && apart > leader.explains) {
      const farD = room[at] as number;
      const farH = room[at + 1] as number;
      const spreadD = sumDD - (sumD * sumD) / split;
      const farSpreadD = (room[at + 2] as number) - (farD * farD) / farCount;
      const ownSlope = (sumDH - (sumD * sumH) / split) / spreadD;
      const farSlope = ((room[at + 3] as number) - (farD * farH) / farCount) / farSpreadD;
      // How far the ends of the gap lie from the middle of each part, and the steps there.
      const ownBefore = before - leftEnd - sumD / split;
      const ownAfter = after - leftEnd - sumD / split;
      const farBefore = rightEnd - before - farD / farCount;
      const farAfter = rightEnd - after - farD / farCount;
      const level = sumH / split - farH / farCount;
      const stepBefore = level + ownSlope * ownBefore - farSlope * farBefore;
      const stepAfter = level + ownSlope * ownAfter - farSlope * farAfter;
      const even = 1 / split + 1 / farCount;
      const loss =
        stepBefore * stepAfter <= 0
          ? 0
          : Math.min(
              stepBefore ** 2 / (even + ownBefore ** 2 / spreadD + farBefore ** 2 / farSpreadD),
              stepAfter ** 2 / (even + ownAfter ** 2 / spreadD + farAfter ** 2 / farSpreadD),
            );
      if (apart - loss > leader.explains) {
        leader.explains = apart - loss;
        leader.split = split;
      }
    }
    const distance = after - leftEnd;
    const height = (y[split] as number) - meanY - slope * (after - meanX);
    sumD += distance;
    sumH += height;
    sumDD += distance * distance;
    sumDH += distance * height;
  }
}
