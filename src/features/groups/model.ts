import type { ComponentRun } from '#contract/components.ts';
import type { Group, Grouping, Sweep } from '#contract/groupings.ts';
import type { LinePanel } from '#src/components/charts/line-chart.tsx';
import { formatFixed, formatMetres, formatShare } from '#src/lib/format.ts';
import { asOpening, inWords, listed } from '#src/lib/number-words.ts';

/** Under this the group of an interval is a matter of opinion. */
export const UNCERTAIN_UNDER = 0.6;
/** A group whose runs are short and no longer than chance gives is proposed for merging. */
export const LEAST_KAPPA = 0.2;
const SHORT_RUN_INTERVALS = 2;

/** Share of the grouped metres whose membership is under the limit; null where nothing is grouped. */
export function shareBetween(membership: Float64Array, weight: Float64Array): number | null {
  let [between, total] = [0, 0];
  for (let row = 0; row < membership.length; row++) {
    const [value, metres] = [membership[row] ?? NaN, weight[row] ?? NaN];
    if (Number.isNaN(value) || !(metres > 0)) continue;
    total += metres;
    if (value < UNCERTAIN_UNDER) between += metres;
  }
  return total > 0 ? between / total : null;
}

/** Why a group does not hold down the hole, or null. */
export function scattered({ contiguity, metres, intervals }: Group): string | null {
  if (contiguity === null || contiguity.kappa === null) return null;
  const isShort = contiguity.meanRunM < (SHORT_RUN_INTERVALS * metres) / Math.max(1, intervals);
  return isShort && contiguity.kappa < LEAST_KAPPA ? `its runs, ${formatMetres(contiguity.meanRunM)} on average, are hardly longer than chance gives` : null;
}

interface Standing {
  betweenShare: number | null;
  sweep: Sweep | null;
}

/** Less between groups than this is not worth a sentence. */
const NOTABLE_SHARE = 0.01;

/** What holds, in one to three sentences from the numbers. */
export function groupsFinding(grouping: Grouping, { betweenShare, sweep }: Standing): string {
  const sentences = [holdingSentence(grouping)];
  if (betweenShare !== null && betweenShare >= NOTABLE_SHARE) sentences.push(`${formatShare(betweenShare)} of the ${grouping.support === 'surface' ? 'samples' : 'metres'} lie between groups.`);
  if (sweep !== null && sweep.suggestedK !== grouping.k) sentences.push(`By silhouette the sweep prefers ${inWords(sweep.suggestedK)}.`);
  return sentences.join(' ');
}

function holdingSentence({ groups, k, support, silhouette }: Grouping): string {
  const count = asOpening(inWords(k));
  if (support === 'surface') return `${count} groups of surface samples${silhouette === null ? '' : `, mean silhouette ${formatFixed(silhouette, 2)}`}; without holes, contiguity is not judged.`;
  const loose = groups.filter((group) => scattered(group) !== null);
  if (loose.length > 0) return `${asOpening(inWords(k - loose.length))} of ${inWords(k)} groups hold; ${listed(loose.map(({ name }) => name))} ${loose.length === 1 ? 'comes' : 'come'} in runs hardly longer than chance.`;
  const shortest = [...groups].sort((a, b) => (a.contiguity?.meanRunM ?? Infinity) - (b.contiguity?.meanRunM ?? Infinity))[0];
  return `${count} groups hold in runs longer than chance${shortest?.contiguity ? `, the shortest ${formatMetres(shortest.contiguity.meanRunM)} (${shortest.name})` : ''}.`;
}

/** Newest sweep on the same components, one as wide as the grouping before others. */
export function sweepFor(sweeps: readonly Sweep[], grouping: Pick<Grouping, 'componentRunId' | 'components'> | null, runId: number | null): Sweep | null {
  const own = sweeps.filter(({ componentRunId }) => componentRunId === (grouping?.componentRunId ?? runId));
  return own.find(({ components }) => components === grouping?.components) ?? own[0] ?? null;
}

const THOUSAND = 1000;

/** Criteria against k, one under the other: each in its own unit. */
export function sweepPanels({ rows }: Sweep): LinePanel[] {
  const series = (label: string, value: (row: Sweep['rows'][number]) => number | null) => ({
    series: [{ label, points: rows.flatMap((row) => (value(row) === null ? [] : [{ x: row.k, y: value(row) ?? NaN }])) }],
  });
  return [
    series('silhouette', ({ silhouette }) => silhouette),
    series('Calinski–Harabasz, 1000s', ({ calinskiHarabasz }) => (calinskiHarabasz === null ? null : calinskiHarabasz / THOUSAND)),
  ];
}

/** Parts ordered as the first component sets them against each other: neighbours in the rock stand together. */
export function partOrder(parts: readonly string[], run: Pick<ComponentRun, 'parts' | 'loadings'> | null): number[] {
  const loading = (part: string) => run?.loadings[run.parts.indexOf(part)]?.[0] ?? 0;
  return parts.map((_part, index) => index).sort((a, b) => loading(parts[b] ?? '') - loading(parts[a] ?? '') || a - b);
}

/** Category index of every row: the group's place in the list, NaN where a row has none. */
export function categoryOf(label: Float64Array, groups: readonly Group[]): Float64Array {
  const place = new Map(groups.map((group, index) => [group.label, index]));
  return Float64Array.from(label, (own) => place.get(own) ?? NaN);
}

/** Groups with at least a tenth of some rows' metres: those a domain of them would be made of. */
export function mainGroups(label: Float64Array, weight: Float64Array, rows: Iterable<number>): number[] {
  const metres = new Map<number, number>();
  let total = 0;
  for (const row of rows) {
    const [own, length] = [label[row] ?? NaN, weight[row] ?? 0];
    total += length;
    if (Number.isFinite(own)) metres.set(own, (metres.get(own) ?? 0) + length);
  }
  return [...metres].filter(([, length]) => length >= total / 10).sort((a, b) => b[1] - a[1]).map(([own]) => own);
}
