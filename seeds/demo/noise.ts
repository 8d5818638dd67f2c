import type { Random } from '#kernels/random.ts';

/** Draws the generator needs, from one seeded stream. */
export interface Noise {
  uniform(low: number, high: number): number;
  normal(): number;
  /** exp of a normal draw of this standard deviation: median 1. */
  lognormal(sigma: number): number;
  chance(probability: number): boolean;
  pick<Item>(items: readonly [Item, ...Item[]]): Item;
}

/** Box–Muller pairs: many times faster than a quantile per draw, and exact enough for made-up rock. */
function normalStream(random: Random): () => number {
  let spare: number | null = null;
  return () => {
    if (spare !== null) {
      const kept = spare;
      spare = null;
      return kept;
    }
    const radius = Math.sqrt(-2 * Math.log(1 - random.uniform()));
    const angle = 2 * Math.PI * random.uniform();
    spare = radius * Math.sin(angle);
    return radius * Math.cos(angle);
  };
}

export function noiseFrom(random: Random): Noise {
  const normal = normalStream(random);
  return {
    uniform: (low, high) => low + (high - low) * random.uniform(),
    normal,
    lognormal: (sigma) => Math.exp(sigma * normal()),
    chance: (probability) => random.uniform() < probability,
    pick: (items) => items[random.below(items.length)] ?? items[0],
  };
}

/** Values that wander down a hole: standard normal, correlated from one step to the next. */
export interface Wander {
  /** Moves every named value one sample on. */
  step(): void;
  value(name: string): number;
}

export function wanderFrom(noise: Noise, correlation: number): Wander {
  const values = new Map<string, number>();
  const fresh = Math.sqrt(1 - correlation * correlation);
  return {
    step: () => {
      for (const [name, value] of values)
        values.set(name, correlation * value + fresh * noise.normal());
    },
    value: (name) => {
      const known = values.get(name);
      if (known !== undefined) return known;
      const first = noise.normal();
      values.set(name, first);
      return first;
    },
  };
}

/** A smooth bump field between -1 and 1: a fixed sum of waves, so that surfaces are never flat. */
export function ripple(a: number, b: number, wavelength: number, phase: number): number {
  const turn = (2 * Math.PI) / wavelength;
  return (
    0.55 * Math.sin(turn * a + phase) * Math.cos(0.8 * turn * b - phase) +
    0.45 * Math.sin(0.47 * turn * (a + 1.3 * b) + 2.1 * phase)
  );
}

/** Rounds to a number of decimals without leaving binary dust in the text. */
export const roundTo = (value: number, decimals: number): number => Number(value.toFixed(decimals));
