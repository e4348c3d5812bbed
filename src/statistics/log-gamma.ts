// Stirling's series converges to double precision from here on with the terms kept below.
const fromHere = 10;

/**
 * Natural logarithm of the gamma function for z > 0, to about 1e-15 absolute near its zeros at 1 and 2
 * and relative elsewhere: shifted upward by Γ(z+1) = z·Γ(z), then Stirling's series
 * (Abramowitz & Stegun 6.1.41).
 */
export function logGamma(z: number): number {
  let product = 1;
  let shifted = z;
  while (shifted < fromHere) {
    product *= shifted;
    shifted += 1;
  }
  return (
    (shifted - 0.5) * Math.log(shifted) -
    shifted +
    0.5 * Math.log(2 * Math.PI) +
    stirlingRemainder(shifted) -
    Math.log(product)
  );
}

/**
 * Natural logarithm of the beta function B(a, b), a, b > 0. Where one argument is large the difference
 * of two large logarithms is taken by hand, so that nothing is lost for a in the millions as long as
 * the other argument is small, which is all that the distributions here ask for.
 */
export function logBeta(a: number, b: number): number {
  const small = Math.min(a, b);
  const large = Math.max(a, b);
  if (large < fromHere) return logGamma(small) + logGamma(large) - logGamma(small + large);
  const quotient =
    stirlingRemainder(large) -
    stirlingRemainder(large + small) -
    (large + small - 0.5) * Math.log1p(small / large) -
    small * Math.log(large) +
    small;
  return logGamma(small) + quotient;
}

/** ln Γ(z) − [(z − ½) ln z − z + ½ ln 2π], z ≥ 10, from the Bernoulli numbers. */
function stirlingRemainder(z: number): number {
  const w = 1 / (z * z);
  return (
    (1 / 12 -
      w * (1 / 360 - w * (1 / 1260 - w * (1 / 1680 - w * (1 / 1188 - w * (691 / 360360 - w / 156)))))) /
    z
  );
}
