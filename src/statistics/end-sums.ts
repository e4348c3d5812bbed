/** Points ascending in x, and the overall line that is taken off y while it is read. */
export interface LevelledPoints {
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly meanX: number;
  readonly meanY: number;
  readonly slope: number;
}

/** How many numbers are kept for each border: Σd, Σh, Σd², Σdh, Σh². */
export const sumsKept = 5;

/**
 * Sums over all points left of each border (`fromLeft`) and from each border on to the right
 * (`fromRight`), `sumsKept` numbers a border: of the distance d from that end of the data, and of the
 * height h above the overall line. Counting from the own end keeps a short part near an end as exact as
 * a long one. Two passes; memory grows with the number of borders only.
 */
export interface EndSums {
  readonly borders: Int32Array;
  readonly fromLeft: Float64Array;
  readonly fromRight: Float64Array;
}

export function endSums(points: LevelledPoints, borders: Int32Array): EndSums {
  return { borders, fromLeft: leftSums(points, borders), fromRight: rightSums(points, borders) };
}

function leftSums({ x, y, meanX, meanY, slope }: LevelledPoints, borders: Int32Array): Float64Array {
  const kept = new Float64Array(sumsKept * borders.length);
  const end = x[0] as number;
  let sumD = 0;
  let sumH = 0;
  let sumDD = 0;
  let sumDH = 0;
  let sumHH = 0;
  let index = 0;
  for (let border = 0; border < borders.length; border += 1) {
    for (const upTo = borders[border] as number; index < upTo; index += 1) {
      const place = x[index] as number;
      const distance = place - end;
      const height = (y[index] as number) - meanY - slope * (place - meanX);
      sumD += distance;
      sumH += height;
      sumDD += distance * distance;
      sumDH += distance * height;
      sumHH += height * height;
    }
    const at = sumsKept * border;
    kept[at] = sumD;
    kept[at + 1] = sumH;
    kept[at + 2] = sumDD;
    kept[at + 3] = sumDH;
    kept[at + 4] = sumHH;
  }
  return kept;
}

function rightSums({ x, y, meanX, meanY, slope }: LevelledPoints, borders: Int32Array): Float64Array {
  const kept = new Float64Array(sumsKept * borders.length);
  const end = x[x.length - 1] as number;
  let sumD = 0;
  let sumH = 0;
  let sumDD = 0;
  let sumDH = 0;
  let sumHH = 0;
  let index = x.length - 1;
  for (let border = borders.length - 1; border >= 0; border -= 1) {
    for (const downTo = borders[border] as number; index >= downTo; index -= 1) {
      const place = x[index] as number;
      const distance = end - place;
      const height = (y[index] as number) - meanY - slope * (place - meanX);
      sumD += distance;
      sumH += height;
      sumDD += distance * distance;
      sumDH += distance * height;
      sumHH += height * height;
    }
    const at = sumsKept * border;
    kept[at] = sumD;
    kept[at + 1] = sumH;
    kept[at + 2] = sumDD;
    kept[at + 3] = sumDH;
    kept[at + 4] = sumHH;
  }
  return kept;
}

/** How much of Σh² the line through some points explains, from their count and sums; 0 for none. */
export function explained(count: number, sumD: number, sumH: number, sumDD: number, sumDH: number): number {
  const share = 1 / count;
  const spreadDH = sumDH - sumD * sumH * share;
  return sumH * sumH * share + (spreadDH * spreadDH) / (sumDD - sumD * sumD * share);
}
