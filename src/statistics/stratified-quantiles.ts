import { normalDistribution, normalQuantile } from './normal.js';
import { studentTQuantile } from './student-t.js';

/**
 * A distribution cut into strata of equal probability, and the value in the middle of each, rising: the standard
 * normal one, or Student's t with so many degrees of freedom (Infinity: the normal one). They are symmetric.
 * Values of t between some two hundred exact ones are interpolated in ln(t/z) over the normal value z, which is
 * nearly straight; that is true to 1e-4 of each, far less than what any number of draws leaves open.
 */
export function stratifiedQuantiles(strata: number, degreesOfFreedom: number): Float64Array {
  const values = new Float64Array(strata);
  const stretch = degreesOfFreedom === Infinity ? undefined : stretchOfT(strata, degreesOfFreedom);
  for (let index = 0; 2 * index + 1 < strata; index += 1) {
    const z = normalQuantile((index + 0.5) / strata);
    const value = stretch === undefined ? z : z * stretch(-z);
    values[index] = value;
    values[strata - 1 - index] = -value;
  }
  return values;
}

const nodes = 200;

/** By how much further out t lies than the normal value of the same probability. */
function stretchOfT(strata: number, degreesOfFreedom: number): (z: number) => number {
  const furthest = -normalQuantile(0.5 / strata);
  const step = furthest / nodes;
  const logarithms = Float64Array.from({ length: nodes + 2 }, (_, node) => {
    // At the very middle the two are in the ratio that they nearly have beside it.
    const z = Math.max(node, 1e-3) * step;
    return Math.log(-studentTQuantile(normalDistribution(-z), degreesOfFreedom) / z);
  });
  return (z) => {
    const place = z / step;
    const node = Math.min(nodes, Math.floor(place));
    const before = logarithms[node] ?? 0;
    const after = logarithms[node + 1] ?? before;
    return Math.exp(before + (place - node) * (after - before));
  };
}
