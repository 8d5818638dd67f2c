import { formatCount } from '#src/lib/format.ts';

export interface Ruler {
  /** Positions as shares of the whole length. */
  minor: number[];
  major: { share: number; label: string }[];
}

const STEPS = [1, 2, 5];

/** The smallest of 1, 2, 5 × 10^n that divides a length into no more than so many parts. */
export function niceStep(length: number, mostParts: number): number {
  for (let power = 1; power < 1e12; power *= 10) {
    for (const step of STEPS) if (length / (step * power) <= mostParts) return step * power;
  }
  return length;
}

/** Breaks in the core: 1,000 m where that gives no more than 20. */
export const notchStep = (totalMetres: number): number =>
  totalMetres > 1000 && totalMetres <= 20_000 ? 1000 : niceStep(totalMetres, 20);

/** Ticks of a length in metres; from 2 km on in kilometres. */
export function rulerOf(totalMetres: number): Ruler {
  const step = niceStep(totalMetres, 6);
  const inKm = totalMetres >= 2000;
  const parts = Math.floor(totalMetres / step);
  const major = Array.from({ length: parts + 1 }, (_, index) => {
    const value = (index * step) / (inKm ? 1000 : 1);
    return {
      share: (index * step) / totalMetres,
      label: index === 0 ? (inKm ? '0 km' : '0 m') : formatCount(value),
    };
  });
  const minorStep = step / 4;
  const minor = Array.from({ length: Math.floor(totalMetres / minorStep) + 1 }, (_, index) => index)
    .filter((index) => index % 4 !== 0)
    .map((index) => (index * minorStep) / totalMetres);
  return { minor, major };
}
