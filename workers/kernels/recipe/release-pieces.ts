import { LOGGING_TOLERANCE_M } from '#kernels/intervals/interval-table.ts';
import { mergeIntervals } from '#kernels/intervals/merge-intervals.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { compareCodePoints } from '#kernels/tables/category.ts';
import type { CodedInterval } from './code-lines.ts';

/** A piece of hole with its code in two releases; null where one has none. */
export interface ReleasePiece {
  hole: string;
  fromM: number;
  toM: number;
  before: string | null;
  after: string | null;
}

/**
 * Cuts two releases at the ends of both. Ground that neither codes gives no piece.
 *
 * @param before, after Coded intervals, in any order, without overlaps inside a hole.
 * @returns By hole (code point), then depth.
 * @throws {KernelError} `bad-interval`, `overlap`; `bad-parameter` with { row } at an empty hole or
 *   code; `too-few-rows` when both are empty.
 */
export function crossReleases(
  before: readonly CodedInterval[],
  after: readonly CodedInterval[],
): ReleasePiece[] {
  const [old, fresh] = [byHole(before, 'old'), byHole(after, 'new')];
  const holes = [...new Set([...old.keys(), ...fresh.keys()])].sort(compareCodePoints);
  if (holes.length === 0)
    throw new KernelError('too-few-rows', 'expected coded intervals, found none');
  return holes.flatMap((hole) => piecesOf(hole, old.get(hole) ?? [], fresh.get(hole) ?? []));
}

/**
 * The pieces that two releases code differently, neighbours of the same change joined: the list to go
 * through when a new release comes in.
 *
 * @throws {KernelError} As `crossReleases`.
 */
export function releaseDifferences(
  before: readonly CodedInterval[],
  after: readonly CodedInterval[],
): ReleasePiece[] {
  const changes: ReleasePiece[] = [];
  for (const piece of crossReleases(before, after)) {
    if (piece.before === piece.after) continue;
    const last = changes.at(-1);
    const isSame =
      last?.hole === piece.hole &&
      last.before === piece.before &&
      last.after === piece.after &&
      piece.fromM - last.toM <= LOGGING_TOLERANCE_M;
    if (last && isSame) last.toM = piece.toM;
    else changes.push({ ...piece });
  }
  return changes;
}

function byHole(rows: readonly CodedInterval[], name: string): Map<string, CodedInterval[]> {
  const holes = new Map<string, CodedInterval[]>();
  rows.forEach((row, at) => {
    if (row.hole === '' || row.code === '')
      throw new KernelError(
        'bad-parameter',
        `expected a hole and a code in row ${at} of the ${name} release, found "${row.hole}", "${row.code}"`,
        { row: at },
      );
    const own = holes.get(row.hole);
    if (own) own.push(row);
    else holes.set(row.hole, [row]);
  });
  return holes;
}

function piecesOf(
  hole: string,
  before: readonly CodedInterval[],
  after: readonly CodedInterval[],
): ReleasePiece[] {
  const tableOf = (rows: readonly CodedInterval[]) => ({
    fromM: Float64Array.from(rows, ({ fromM }) => fromM),
    toM: Float64Array.from(rows, ({ toM }) => toM),
  });
  const merged = mergeIntervals(tableOf(before), tableOf(after));
  return Array.from(merged.fromM, (fromM, i) => ({
    hole,
    fromM,
    toM: merged.toM[i]!,
    before: before[merged.rowA[i]!]?.code ?? null,
    after: after[merged.rowB[i]!]?.code ?? null,
  }));
}
