import type { Grouping } from '#contract/groupings.ts';
import { FRAME } from '#contract/snapshots.ts';
import { contiguity } from '#kernels/clustering/contiguity.ts';
import { downHoleSequences } from '#kernels/clustering/down-hole-sequences.ts';
import { fingerprints } from '#kernels/clustering/fingerprints.ts';
import { kMeans } from '#kernels/clustering/k-means.ts';
import { ownMembership, withinVariance } from '#kernels/clustering/membership.ts';
import { silhouette } from '#kernels/clustering/silhouette.ts';
import { groupValidity } from '#kernels/clustering/validity.ts';
import type { ColumnStore } from '#server/db/column-store.ts';
import { readParts, toClr } from '#workers/frame/parts.ts';
import { componentNames } from '#workers/frame/component-names.ts';
import { overFrame, readFrameCategory, readLengths, supportRange, type SnapshotTables, type Support } from '#workers/frame/snapshot-tables.ts';
import { defineTask } from '#workers/task.ts';

export interface GroupingInput {
  depositId: number;
  jobId: number;
  componentTableId: number;
  tables: SnapshotTables;
  support: Support;
  parts: string[];
  replacementFraction: number;
  components: number;
  k: number;
  seed: number;
}

export interface GroupingOutput {
  tableId: number;
  result: Pick<Grouping, 'support' | 'n' | 'inertia' | 'silhouette' | 'silhouetteRows' | 'calinskiHarabasz' | 'fingerprints'> & {
    groups: Omit<Grouping['groups'][number], 'name' | 'slot' | 'version'>[];
  };
}

interface GroupedRows {
  labels: Uint8Array;
  membership: Float64Array;
  lengths: Float64Array;
}

/** How each group lies down the holes; surface samples have no order. */
function contiguityOf(store: ColumnStore, { tables, support }: GroupingInput, { labels, lengths }: GroupedRows) {
  if (support === 'surface') return [];
  const range = supportRange(tables, support);
  const { codes } = readFrameCategory(store, tables, support, FRAME.hole);
  const fromM = store.readNumbers(tables.frameTableId, FRAME.from, range);
  const toM = store.readNumbers(tables.frameTableId, FRAME.to, range);
  return contiguity({ labels, sequence: downHoleSequences({ hole: codes, fromM, toM }), lengthM: lengths }).classes;
}

function lithologyOf(label: number, { labels, lengths }: GroupedRows, rock: { codes: Float64Array; dictionary: string[] }) {
  const sums = new Map<string | null, number>();
  let total = 0;
  labels.forEach((own, row) => {
    if (own !== label) return;
    const code = rock.dictionary[rock.codes[row] ?? -1] ?? null;
    sums.set(code, (sums.get(code) ?? 0) + (lengths[row] ?? 0));
    total += lengths[row] ?? 0;
  });
  return [...sums].map(([code, metres]) => ({ code, metres, share: total > 0 ? metres / total : 0 })).sort((a, b) => b.metres - a.metres);
}

function groupsOf(store: ColumnStore, input: GroupingInput, rows: GroupedRows): GroupingOutput['result']['groups'] {
  const classes = contiguityOf(store, input, rows);
  const rock = readFrameCategory(store, input.tables, input.support, FRAME.lithology);
  return Array.from({ length: input.k }, (_, i) => {
    const label = i + 1;
    let [intervals, metres, membership] = [0, 0, 0];
    rows.labels.forEach((own, row) => {
      if (own !== label) return;
      intervals += 1;
      metres += rows.lengths[row] ?? 0;
      membership += rows.membership[row] ?? 0;
    });
    const found = classes.find((candidate) => candidate.label === label);
    const down = found ? { runs: found.runs, expectedRuns: found.expectedRuns, kappa: found.kappa, meanRunM: found.meanRunM } : null;
    return { label, intervals, metres, meanMembership: intervals > 0 ? membership / intervals : 0, contiguity: down, lithology: lithologyOf(label, rows, rock) };
  });
}

/** Groups rows by k-means on component scores and describes the groups. */
export default defineTask<GroupingInput, GroupingOutput>((input, { report, store }) => {
  const { depositId, jobId, componentTableId, tables, support, parts, replacementFraction, components, k, seed } = input;
  report('read scores', 0);
  const range = supportRange(tables, support);
  const columns = componentNames(components).map((name) => store().readNumbers(componentTableId, name, range));
  const found = kMeans({ columns, k, seed, onProgress: (share) => report('group', 0.05 + 0.5 * share) });
  report('judge', 0.6);
  const variance = withinVariance(found.inertia, found.nUsed, k, components);
  const membership = ownMembership({ columns, centroids: found.centroids, variance });
  const widths = silhouette(columns, found.labels, { seed, onProgress: (share) => report('judge', 0.6 + 0.15 * share) });
  const validity = groupValidity(columns, found.labels);
  report('read fingerprints', 0.8);
  const clr = toClr(readParts(store(), { tables, support, parts, replacementFraction }, (share) => report('read fingerprints', 0.8 + 0.08 * share)));
  const prints = fingerprints(clr, found.labels);
  const rows = { labels: found.labels, membership, lengths: readLengths(store(), tables, support) };
  report('write groups', 0.9);
  const tableId = store().createTable({ depositId, nRows: tables.rows, purpose: `${k} groups`, jobId });
  const labels = Float64Array.from(found.labels, (label) => (label === 0 ? Number.NaN : label));
  store().writeNumbers(tableId, { name: 'group' }, overFrame(labels, tables, support));
  store().writeNumbers(tableId, { name: 'membership' }, overFrame(membership, tables, support));
  const values = prints.labels.map((_, group) => Array.from(prints.values.subarray(group * parts.length, (group + 1) * parts.length)));
  return {
    tableId,
    result: {
      support, n: found.nUsed, inertia: found.inertia, silhouette: widths.mean, silhouetteRows: widths.n, calinskiHarabasz: validity.calinskiHarabasz,
      groups: groupsOf(store(), input, rows), fingerprints: { parts, values },
    },
  };
});
