import { normalQuantile } from './normal.ts';

/** A stream of reproducible numbers; the only source of randomness in the kernels. */
export interface Random {
  /** 32 random bits as an unsigned integer. */
  readonly bits: () => number;
  /** Uniform on [0, 1), 53 bits. */
  readonly uniform: () => number;
  /** Standard normal, one uniform draw each. */
  readonly normal: () => number;
  /** Uniform integer in [0, limit). */
  readonly below: (limit: number) => number;
}

/** Four outputs of splitmix32 from a seed: the generator's first state. */
function stateFromSeed(seed: number): Uint32Array {
  const state = new Uint32Array(4);
  let s = seed >>> 0;
  for (let i = 0; i < 4; i++) {
    s = (s + 0x9e3779b9) >>> 0;
    let z = s;
    z ^= z >>> 16;
    z = Math.imul(z, 0x21f0aaad);
    z ^= z >>> 15;
    z = Math.imul(z, 0x735a2d97);
    z ^= z >>> 15;
    state[i] = z;
  }
  return state;
}

/** The generator from four explicit state words (not all zero). */
export function randomFromState(words: readonly [number, number, number, number]): Random {
  let [a, b, c, d] = words;
  const bits = (): number => {
    const x5 = Math.imul(b, 5);
    const result = Math.imul((x5 << 7) | (x5 >>> 25), 9) >>> 0;
    const t = b << 9;
    c ^= a;
    d ^= b;
    b ^= c;
    a ^= d;
    c ^= t;
    d = (d << 11) | (d >>> 21);
    return result;
  };
  const uniform = (): number => ((bits() >>> 5) * 67108864 + (bits() >>> 6)) / 9007199254740992;
  return {
    bits,
    uniform,
    normal: () => normalQuantile(Math.max(uniform(), Number.MIN_VALUE)),
    below: (limit) => Math.floor(uniform() * limit),
  };
}

/**
 * Seeded xoshiro128**: the same seed gives the same stream on every machine.
 *
 * @param seed Any integer; only its low 32 bits count.
 * @see Blackman & Vigna (2018), Scrambled linear pseudorandom number generators (from memory).
 */
export function seededRandom(seed: number): Random {
  const [a, b, c, d] = stateFromSeed(seed);
  return randomFromState([a ?? 0, b ?? 0, c ?? 0, d ?? 0]);
}
