import { UnfitDataError } from './unfit-data-error.js';

/**
 * Mean, scatter and extremes of values that come one at a time and are not kept: memory does not grow
 * with their number. Welford's updating formulas, so that a small scatter on a large mean is not lost
 * (B. P. Welford, Technometrics 4 (1962); from memory).
 * @example
 * const moments = new RunningMoments();
 * for (const volts of [15.21, 15.19, 15.20]) moments.add(volts);
 * moments.mean; // => 15.2
 */
export class RunningMoments {
  #count = 0;
  #mean = 0;
  #sumOfSquares = 0;
  #minimum = Infinity;
  #maximum = -Infinity;

  /** Takes one more value in. @throws UnfitDataError when it is not finite; the moments stay as they were. */
  add(value: number): void {
    if (!Number.isFinite(value)) {
      throw new UnfitDataError('RunningMoments', `value ${this.#count + 1} is ${value}`);
    }
    this.#count += 1;
    const fromOldMean = value - this.#mean;
    this.#mean += fromOldMean / this.#count;
    this.#sumOfSquares += fromOldMean * (value - this.#mean);
    if (value < this.#minimum) this.#minimum = value;
    if (value > this.#maximum) this.#maximum = value;
  }

  /**
   * Takes in all values that another has taken, as if each had come here: exact but for rounding (T. F. Chan,
   * G. H. Golub & R. J. LeVeque, The American Statistician 37 (1983); from memory). The other stays as it is.
   */
  addAll(other: RunningMoments): void {
    if (other.#count === 0) return;
    const count = this.#count + other.#count;
    const apart = other.#mean - this.#mean;
    this.#sumOfSquares += other.#sumOfSquares + apart * apart * this.#count * (other.#count / count);
    this.#mean += apart * (other.#count / count);
    this.#count = count;
    this.#minimum = Math.min(this.#minimum, other.#minimum);
    this.#maximum = Math.max(this.#maximum, other.#maximum);
  }

  /** Writes them into a row of numbers, `momentsWidth` of them from `at` on, where many are to be kept in little room. */
  writeTo(row: Float64Array, at: number): void {
    row[at] = this.#count;
    row[at + 1] = this.#mean;
    row[at + 2] = this.#sumOfSquares;
    row[at + 3] = this.#minimum;
    row[at + 4] = this.#maximum;
  }

  /** Those that were written there. */
  static readFrom(row: Float64Array, at: number): RunningMoments {
    const moments = new RunningMoments();
    moments.#count = row[at] as number;
    moments.#mean = row[at + 1] as number;
    moments.#sumOfSquares = row[at + 2] as number;
    moments.#minimum = row[at + 3] as number;
    moments.#maximum = row[at + 4] as number;
    return moments;
  }

  get count(): number {
    return this.#count;
  }

  /** @throws UnfitDataError while there are no values. */
  get mean(): number {
    this.#requireSome();
    return this.#mean;
  }

  /** @throws UnfitDataError while there are no values. */
  get minimum(): number {
    this.#requireSome();
    return this.#minimum;
  }

  /** @throws UnfitDataError while there are no values. */
  get maximum(): number {
    this.#requireSome();
    return this.#maximum;
  }

  /** Experimental variance, n − 1 in the denominator (JCGM 100:2008, 4.2.2); undefined below two values. */
  get sampleVariance(): number | undefined {
    return this.#count < 2 ? undefined : this.#sumOfSquares / (this.#count - 1);
  }

  /** Experimental standard deviation; undefined below two values. */
  get sampleDeviation(): number | undefined {
    const variance = this.sampleVariance;
    return variance === undefined ? undefined : Math.sqrt(variance);
  }

  /** Type A standard uncertainty of the mean, s/√n (JCGM 100:2008, 4.2.3); undefined below two values. */
  get uncertaintyOfMean(): number | undefined {
    const variance = this.sampleVariance;
    return variance === undefined ? undefined : Math.sqrt(variance / this.#count);
  }

  #requireSome(): void {
    if (this.#count === 0) throw new UnfitDataError('RunningMoments', 'there are no values');
  }
}

/** How many numbers moments are written as. */
export const momentsWidth = 5;

/** Those that are kept for a name, begun where there are none yet. */
export function momentsAt(moments: Map<string, RunningMoments>, name: string): RunningMoments {
  const known = moments.get(name);
  if (known !== undefined) return known;
  const fresh = new RunningMoments();
  moments.set(name, fresh);
  return fresh;
}
