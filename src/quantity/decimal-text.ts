/**
 * The decimal text of `value` times ten to the power of `places`, digit for digit: the point is moved in
 * the text and nothing is multiplied, so that reading the text back with the opposite shift gives the very
 * same number. With `significant` it is rounded to that many digits first and keeps trailing zeros.
 * @example shiftedText(0.035, 3); // => '35'
 * @example shiftedText(15.2, 0, 4); // => '15.20'
 */
export function shiftedText(value: number, places: number, significant?: number): string {
  const [mantissa = '0', exponentText = '0'] = exponentialText(value, significant);
  const exponent = value === 0 ? 0 : Number(exponentText) + places;
  return exponent < -7 || exponent > 20 ? `${mantissa}e${exponent}` : spelledOut(mantissa, exponent);
}

/** Every digit of a finite number and no exponent, however small or large: reading it gives the same number. */
export function plainDecimal(value: number): string {
  const [mantissa = '0', exponent = '0'] = exponentialText(value);
  return spelledOut(mantissa, Number(exponent));
}

function spelledOut(mantissa: string, exponent: number): string {
  const sign = mantissa.startsWith('-') ? '-' : '';
  const digits = mantissa.replace('-', '').replace('.', '');
  if (exponent < 0) return `${sign}0.${'0'.repeat(-exponent - 1)}${digits}`;
  const whole = digits.slice(0, exponent + 1).padEnd(exponent + 1, '0');
  const rest = digits.slice(exponent + 1);
  return rest === '' ? `${sign}${whole}` : `${sign}${whole}.${rest}`;
}

/**
 * `value` times ten to the power of `places`, correctly rounded: 0.07 by two places is 7, where
 * multiplying gives 7.000000000000001. What is not finite stays as it is.
 */
export function shifted(value: number, places: number): number {
  if (!Number.isFinite(value)) return value;
  const [mantissa = '0', exponent = '0'] = exponentialText(value);
  return Number(`${mantissa}e${Number(exponent) + places}`);
}

/**
 * The product of two numbers as they are written in decimals, correctly rounded: 4.35 times 100 is 435, where
 * multiplying gives 434.99999999999994. What is not finite is multiplied as ever.
 */
export function product(one: number, other: number): number {
  if (!Number.isFinite(one) || !Number.isFinite(other)) return one * other;
  const [digits, places] = decimal(one);
  const [otherDigits, otherPlaces] = decimal(other);
  return Number(`${digits * otherDigits}e${places + otherPlaces}`);
}

/** All digits as a whole number, and the power of ten that it is to be multiplied by. */
function decimal(value: number): readonly [bigint, number] {
  const [mantissa = '0', exponent = '0'] = exponentialText(value);
  const [whole = '0', rest = ''] = mantissa.split('.');
  return [BigInt(whole + rest), Number(exponent) - rest.length];
}

/** The power of ten of the first digit, after rounding to `significant` digits; 0 for zero. */
export function decimalExponent(value: number, significant?: number): number {
  return Number(exponentialText(value, significant)[1]);
}

function exponentialText(value: number, significant?: number): string[] {
  const digits = significant === undefined ? undefined : Math.min(Math.max(significant, 1), 17) - 1;
  return value.toExponential(digits).split('e');
}
