/**
 * Chance that can be repeated: the same seed gives the same stream. `fork` gives an independent stream by
 * name and takes nothing from this one, so that one more reading of the meter changes nothing for the load.
 */
export interface Random {
  /** Evenly within [low, high). */
  readonly uniform: (low: number, high: number) => number;
  /** Normally distributed with mean 0 and standard deviation 1. */
  readonly normal: () => number;
  readonly fork: (name: string) => Random;
}

/**
 * A stream from a seed: sfc32 (Doty-Humphrey's small fast counter of 128 bits, as PractRand has it),
 * its state filled by splitmix32. For scatter and made-up instrument errors, never for secrets.
 */
export function randomFrom(seed: number): Random {
  const next = sfc32(seed >>> 0);
  let spare: number | undefined;
  return {
    uniform: (low, high) => low + (high - low) * next(),
    normal: () => {
      if (spare !== undefined) {
        const kept = spare;
        spare = undefined;
        return kept;
      }
      // Box and Muller; 1 − u keeps the logarithm away from zero.
      const radius = Math.sqrt(-2 * Math.log(1 - next()));
      const angle = 2 * Math.PI * next();
      spare = radius * Math.sin(angle);
      return radius * Math.cos(angle);
    },
    fork: (name) => randomFrom(mixed(seed >>> 0, name)),
  };
}

function sfc32(seed: number): () => number {
  const fill = splitmix32(seed);
  let a = fill();
  let b = fill();
  let c = fill();
  let counter = 1;
  const step = (): number => {
    const sum = (a + b + counter) | 0;
    counter = (counter + 1) | 0;
    a = b ^ (b >>> 9);
    b = (c + (c << 3)) | 0;
    c = (((c << 21) | (c >>> 11)) + sum) | 0;
    return sum >>> 0;
  };
  // The first values still show the seed.
  for (let round = 0; round < 12; round++) step();
  return () => step() / 2 ** 32;
}

function splitmix32(seed: number): () => number {
  let state = seed | 0;
  return () => {
    state = (state + 0x9e3779b9) | 0;
    let mix = Math.imul(state ^ (state >>> 16), 0x21f0aaad);
    mix = Math.imul(mix ^ (mix >>> 15), 0x735a2d97);
    return mix ^ (mix >>> 15);
  };
}

/** FNV-1a over the name, begun from the seed. */
function mixed(seed: number, name: string): number {
  let hash = (0x811c9dc5 ^ splitmix32(seed)()) | 0;
  for (const byte of new TextEncoder().encode(name)) hash = Math.imul(hash ^ byte, 0x01000193);
  return hash >>> 0;
}
