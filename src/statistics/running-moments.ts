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

/** Those that are kept for a name, begun where there are none yet. */
export function momentsAt(moments: Map<string, RunningMoments>, name: string): RunningMoments {
  const known = moments.get(name);
  if (known !== undefined) return known;
  const fresh = new RunningMoments();
  moments.set(name, fresh);
  return fresh;
}
