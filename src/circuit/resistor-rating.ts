/** Of a resistor's rating: what it may be loaded with for years in still air, by the usual rule of thumb. */
export const resistorReserve = 0.5;

/** What power resistors are sold for, in W. Common practice, no published source. */
const ratings: readonly number[] = [0.25, 0.5, 1, 2, 3, 5, 7, 10, 15, 25, 50, 100, 200];

/**
 * The smallest usual rating of a resistor, in W: no more than half of it in use, and no more than the whole of
 * it at the worst that it ever has to bear, such as its module at the limit. Undefined where no usual one does.
 * @example resistorRating(0.8); // => 2
 */
export function resistorRating(inUse: number, atWorst = 0): number | undefined {
  return ratings.find((each) => each * resistorReserve >= inUse && each >= atWorst);
}
