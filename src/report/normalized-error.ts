const fewest = 2;
const most = 16;

/**
 * E_n to two digits; near 1, which decides, to as many as tell on which side of it it lies: `1.003`, never `1.00` for
 * what is more.
 */
export function normalizedErrorInWords(normalizedError: number): string {
  let digits = fewest;
  while (digits < most && hidesSide(normalizedError, digits)) digits += 1;
  return normalizedError.toFixed(digits).replace(/^-(0\.00)$/, '$1');
}

function hidesSide(normalizedError: number, digits: number): boolean {
  const size = Math.abs(normalizedError);
  return size !== 1 && Number(size.toFixed(digits)) === 1;
}
