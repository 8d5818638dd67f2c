import type { CodeRun } from '#kernels/tables/code-runs.ts';
import type { IntervalsByHole } from '#kernels/tables/intervals-by-hole.ts';

/** Grades at one distance from the contacts of a pair of domains. */
export interface ContactBin {
  /** Distance from the contact, m: negative in the first domain, positive in the second. */
  fromM: number;
  toM: number;
  n: number;
  mean: number | null;
  /** Null below two rows. */
  standardError: number | null;
}

/** Composites near the contacts of one pair of domains. */
export interface ContactRows {
  /** Row numbers with their unsigned distance to the nearest contact of the pair, m. */
  rows: { row: number; distanceM: number }[];
}

/** A contact: where a run of one domain of the pair lies on a run of the other. */
export interface PairContact {
  depthM: number;
  first: CodeRun;
  second: CodeRun;
  /** True when the first domain lies above. */
  isFirstAbove: boolean;
}

/** Contacts keyed by lower code x levels + higher code. */
export function contactsByPair(
  runs: readonly CodeRun[],
  { fromM, toM }: IntervalsByHole,
  nLevels: number,
): Map<number, PairContact[]> {
  const pairs = new Map<number, PairContact[]>();
  runs.forEach((below, i) => {
    const above = runs[i - 1];
    if (!below.touchesAbove || !above || above.code === below.code) return;
    const isFirstAbove = above.code < below.code;
    const [first, second] = isFirstAbove ? [above, below] : [below, above];
    const key = first.code * nLevels + second.code;
    const depthM = (toM[above.last]! + fromM[below.first]!) / 2;
    const own = pairs.get(key) ?? [];
    own.push({ depthM, first, second, isFirstAbove });
    pairs.set(key, own);
  });
  return pairs;
}

/**
 * Composites of both domains of a pair with their distance to the nearest contact of the pair that
 * bounds their run.
 *
 * @param centreM Depth of each composite's centre.
 * @param obliquity |tangent . contact normal| of each row, 1 where left out.
 */
export function rowsNearContacts(
  contacts: readonly PairContact[],
  side: 'first' | 'second',
  centreM: Float64Array,
  obliquity: Float64Array | undefined,
): ContactRows['rows'] {
  const depths = new Map<CodeRun, number[]>();
  for (const contact of contacts) {
    const run = contact[side];
    depths.set(run, [...(depths.get(run) ?? []), contact.depthM]);
  }
  return [...depths].flatMap(([run, at]) =>
    Array.from({ length: run.last - run.first + 1 }, (_, i) => {
      const row = run.first + i;
      const alongM = Math.min(...at.map((depthM) => Math.abs(centreM[row]! - depthM)));
      return { row, distanceM: alongM * (obliquity?.[row] ?? 1) };
    }),
  );
}

/** Bins of one side, nearest first. */
export function binsOf(
  rows: ContactRows['rows'],
  values: Float64Array,
  side: 'first' | 'second',
  binM: number,
  bins: number,
): ContactBin[] {
  const sign = side === 'first' ? -1 : 1;
  return Array.from({ length: bins }, (_, i) => {
    const own = rows
      .filter(({ distanceM }) => binIndex(distanceM, binM) === i)
      .map(({ row }) => values[row]!)
      .filter((value) => !Number.isNaN(value));
    const n = own.length;
    const mean = own.reduce((sum, value) => sum + value, 0) / n;
    const squares = own.reduce((sum, value) => sum + (value - mean) ** 2, 0);
    const ends = [sign * i * binM, sign * (i + 1) * binM] as const;
    return {
      fromM: Math.min(...ends),
      toM: Math.max(...ends),
      n,
      mean: n > 0 ? mean : null,
      standardError: n > 1 ? Math.sqrt(squares / (n - 1) / n) : null,
    };
  });
}

/** Bin of a distance; a distance on an edge, up to rounding, belongs to the farther bin. */
export function binIndex(distanceM: number, binM: number): number {
  return Math.floor(distanceM / binM + 1e-9);
}
