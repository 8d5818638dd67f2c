import { KernelError } from '#kernels/kernel-error.ts';
import { groupedPoints } from './group-moments.ts';
import { kMeans, type KMeansInput } from './k-means.ts';
import { silhouetteOf } from './silhouette.ts';
import { validityOf } from './validity.ts';

/** Input of `sweepGroups`: that of `kMeans` with a range of k. */
export interface SweepInput extends Omit<KMeansInput, 'k'> {
  kFrom: number;
  kTo: number;
  /** Rows of the silhouette at most, default 3,000. */
  silhouetteRows?: number;
}

/** Criteria of one number of groups. */
export interface SweepRow {
  k: number;
  inertia: number;
  silhouette: number | null;
  simplifiedSilhouette: number | null;
  calinskiHarabasz: number | null;
  daviesBouldin: number | null;
}

/** Criteria side by side and a first proposal. */
export interface Sweep {
  rows: SweepRow[];
  /** Rows the silhouette was taken on. */
  silhouetteRows: number;
  suggestedK: number;
  /** Why, in words; no index decides alone. */
  suggestion: string;
}

/** Silhouettes closer than this count as equal: the fewer groups are proposed. */
const SILHOUETTE_TIE = 0.01;

/**
 * k-means for each k of a range with inertia, silhouette (one fixed draw of rows for every k),
 * Calinski-Harabasz and Davies-Bouldin, and a proposal: the fewest groups whose silhouette is within
 * .01 of the best.
 *
 * @throws {KernelError} `bad-parameter` unless 1 <= kFrom <= kTo <= 250; those of `kMeans`.
 */
export function sweepGroups({
  kFrom,
  kTo,
  silhouetteRows = 3000,
  onProgress,
  ...input
}: SweepInput): Sweep {
  if (!(
    kFrom >= 1 &&
    kFrom <= kTo &&
    kTo <= 250 &&
    Number.isInteger(kFrom) &&
    Number.isInteger(kTo)
  )) {
    throw new KernelError(
      'bad-parameter',
      `expected whole numbers 1 <= kFrom <= kTo <= 250, found ${kFrom} and ${kTo}`,
      { kFrom, kTo },
    );
  }
  const span = kTo - kFrom + 1;
  const rows: SweepRow[] = [];
  let used = 0;
  for (let k = kFrom; k <= kTo; k++) {
    const done = (k - kFrom) / span;
    const { labels, inertia } = kMeans({
      ...input,
      k,
      onProgress: (share) => onProgress?.(done + (0.8 * share) / span),
    });
    const grouped = groupedPoints(input.columns, labels);
    const widths = silhouetteOf(grouped, { sampleSize: silhouetteRows, seed: input.seed });
    const { simplifiedSilhouette, calinskiHarabasz, daviesBouldin } = validityOf(grouped);
    rows.push({
      k,
      inertia,
      silhouette: widths.mean,
      simplifiedSilhouette,
      calinskiHarabasz,
      daviesBouldin,
    });
    used = widths.n;
    onProgress?.(done + 1 / span);
  }
  return { rows, silhouetteRows: used, ...suggest(rows) };
}

/** The proposal and its reason from the criteria alone. */
export function suggest(rows: readonly SweepRow[]): Pick<Sweep, 'suggestedK' | 'suggestion'> {
  const widths = rows.filter((row) => row.silhouette !== null);
  const first = rows[0];
  if (!first) throw new KernelError('too-few-rows', 'no number of groups was tried');
  const best = extreme(widths, (row) => row.silhouette ?? -Infinity);
  if (!best)
    return { suggestedK: first.k, suggestion: 'Only one group was tried: nothing to compare.' };
  const chosen =
    widths.find((row) => (row.silhouette ?? -1) >= (best.silhouette ?? 0) - SILHOUETTE_TIE) ?? best;
  const width = (row: SweepRow) => (row.silhouette ?? 0).toFixed(2);
  const range = `${rows[0]?.k} to ${rows[rows.length - 1]?.k}`;
  const lead =
    chosen.k === best.k
      ? `${chosen.k} groups have the highest mean silhouette (${width(chosen)}) of ${range} groups`
      : `${chosen.k} groups are the fewest with a mean silhouette (${width(chosen)}) within ${SILHOUETTE_TIE} of the highest (${width(best)} at ${best.k})`;
  const others = [
    vote(
      'Calinski–Harabasz',
      extreme(rows, (row) => row.calinskiHarabasz ?? -Infinity),
      chosen.k,
    ),
    vote(
      'Davies–Bouldin',
      extreme(rows, (row) => -(row.daviesBouldin ?? Infinity)),
      chosen.k,
    ),
  ].join(', ');
  const weak =
    (best.silhouette ?? 0) < 0.25 ? ' Below 0.25 the groups hardly stand apart in this space.' : '';
  return {
    suggestedK: chosen.k,
    suggestion: `${lead}; ${others}.${weak} Judge it with contiguity, stability and geology.`,
  };
}

function vote(name: string, row: SweepRow | undefined, chosenK: number): string {
  if (!row) return `${name} is not defined`;
  return row.k === chosenK ? `${name} agrees` : `${name} prefers ${row.k}`;
}

/** The first row with the greatest score; undefined when none is finite or infinite above. */
function extreme(
  rows: readonly SweepRow[],
  score: (row: SweepRow) => number,
): SweepRow | undefined {
  let best: SweepRow | undefined;
  let bestScore = -Infinity;
  for (const row of rows) {
    if (score(row) > bestScore) {
      best = row;
      bestScore = score(row);
    }
  }
  return best;
}
