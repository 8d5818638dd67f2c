import { KernelError } from '#kernels/kernel-error.ts';
import { compactLabels, type Labels } from './group-moments.ts';

/** Input of `modeFilter`. */
export interface ModeFilterInput {
  /** 1..K per row, 0 = unassigned: left as it is, without a vote. */
  labels: Labels;
  /** Sequence of each row, rows of one sequence together (`downHoleSequences`); never crossed. */
  sequence: ArrayLike<number>;
  /** Interval lengths, m. */
  lengthM: Float64Array;
  /** Rows of the window, odd, default 3. */
  window?: number | undefined;
  /** Passes at most, default 5. */
  maxPasses?: number | undefined;
}

/**
 * Each row takes the label with most metres in its window, its own on a tie; all rows at once from the
 * labels before, until nothing changes. Common practice.
 *
 * @returns New labels and the share of labelled rows that changed.
 * @throws {KernelError} `shape`; `bad-parameter` for a label, the window or the passes.
 */
export function modeFilter(input: ModeFilterInput): { labels: Uint16Array; changedShare: number } {
  const { labels, sequence, lengthM, window = 3, maxPasses = 5 } = input;
  const n = labels.length;
  if (sequence.length !== n || lengthM.length !== n)
    throw new KernelError(
      'shape',
      `${n} labels, ${sequence.length} sequences, ${lengthM.length} lengths`,
    );
  if (!(window >= 1 && window % 2 === 1 && maxPasses >= 0))
    throw new KernelError('bad-parameter', `expected an odd window >= 1, found ${window}`, {
      window,
    });
  compactLabels(labels);
  let current = Uint16Array.from(labels);
  for (let pass = 0; pass < maxPasses; pass++) {
    const next = current.map((label, row) =>
      label === 0 ? 0 : commonest(current, sequence, lengthM, row, (window - 1) / 2),
    );
    const moved = next.some((label, row) => label !== current[row]);
    current = next;
    if (!moved) break;
  }
  return { labels: current, changedShare: changedShare(labels, current) };
}

function commonest(
  labels: Uint16Array,
  sequence: ArrayLike<number>,
  lengthM: Float64Array,
  row: number,
  reach: number,
): number {
  const metres = new Map<number, number>();
  for (
    let other = Math.max(0, row - reach);
    other <= Math.min(labels.length - 1, row + reach);
    other++
  ) {
    const label = labels[other]!;
    if (label === 0 || sequence[other] !== sequence[row]) continue;
    metres.set(label, (metres.get(label) ?? 0) + lengthM[other]!);
  }
  let best = labels[row]!;
  let most = metres.get(best) ?? 0;
  for (const [label, length] of [...metres].sort(([a], [b]) => a - b)) {
    if (length <= most) continue;
    best = label;
    most = length;
  }
  return best;
}

/** Share of the labelled rows whose label is another now; 0 without labelled rows. */
export function changedShare(before: Labels, after: Labels): number {
  let labelled = 0;
  let changed = 0;
  for (let row = 0; row < before.length; row++) {
    if (before[row] === 0) continue;
    labelled += 1;
    if (before[row] !== after[row]) changed += 1;
  }
  return labelled > 0 ? changed / labelled : 0;
}
