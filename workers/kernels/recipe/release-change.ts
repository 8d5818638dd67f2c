import { adjustedRandIndex } from '#kernels/clustering/agreement.ts';
import { compareCodePoints } from '#kernels/tables/category.ts';
import type { CodedInterval } from './code-lines.ts';
import { crossReleases } from './release-pieces.ts';

/** Metres of a code in the old release under a code in the new. */
export interface MovedMetres {
  before: string;
  after: string;
  metres: number;
}

/** One domain before and after. */
export interface DomainChange {
  code: string;
  metresBefore: number;
  metresAfter: number;
  /** Metres coded alike in both. */
  keptMetres: number;
  /** From ground only one release covers. */
  addedMetres: number;
  removedMetres: number;
}

export interface ReleaseChange {
  /** Ground that both releases code, m. */
  commonMetres: number;
  /** Ground that only the new or only the old one codes, m. */
  addedMetres: number;
  removedMetres: number;
  /** Share of the common metres whose code changed; null without common ground. */
  movedShare: number | null;
  /** Every pair of codes that shares ground, by name. */
  table: MovedMetres[];
  /** Every code of either release, by name. */
  domains: DomainChange[];
}

/**
 * What a new release moved: both codings are cut at the ends of both and crossed. Codes are matched by
 * name, never by overlap, so a renamed domain counts as moved. Metres are conserved: kept, moved and
 * removed make the old release, kept, moved and added the new.
 *
 * @param before, after Coded intervals of two releases, in any order, without overlaps inside a hole.
 * @throws {KernelError} `bad-interval`, `overlap`; `bad-parameter` with { row } at an empty hole or
 *   code; `too-few-rows` when both are empty.
 */
export function releaseChange(
  before: readonly CodedInterval[],
  after: readonly CodedInterval[],
): ReleaseChange {
  const pieces = crossReleases(before, after);
  const cells = new Map<string, MovedMetres>();
  const domains = new Map<string, DomainChange>();
  const domain = (code: string): DomainChange => {
    const found = domains.get(code) ?? {
      code,
      metresBefore: 0,
      metresAfter: 0,
      keptMetres: 0,
      addedMetres: 0,
      removedMetres: 0,
    };
    domains.set(code, found);
    return found;
  };
  const sums = { common: 0, added: 0, removed: 0, moved: 0 };
  for (const { fromM, toM, before: from, after: to } of pieces) {
    const metres = toM - fromM;
    if (from !== null) domain(from).metresBefore += metres;
    if (to !== null) domain(to).metresAfter += metres;
    if (from !== null && to !== null) {
      sums.common += metres;
      if (from === to) domain(from).keptMetres += metres;
      else sums.moved += metres;
      const key = JSON.stringify([from, to]);
      const cell = cells.get(key) ?? { before: from, after: to, metres: 0 };
      cell.metres += metres;
      cells.set(key, cell);
    } else if (to !== null) {
      sums.added += metres;
      domain(to).addedMetres += metres;
    } else if (from !== null) {
      sums.removed += metres;
      domain(from).removedMetres += metres;
    }
  }
  return {
    commonMetres: sums.common,
    addedMetres: sums.added,
    removedMetres: sums.removed,
    movedShare: sums.common > 0 ? sums.moved / sums.common : null,
    table: [...cells.values()].sort(
      (a, b) => compareCodePoints(a.before, b.before) || compareCodePoints(a.after, b.after),
    ),
    domains: [...domains.values()].sort((a, b) => compareCodePoints(a.code, b.code)),
  };
}

/**
 * Adjusted Rand index of two codings of the same composites.
 *
 * @param before, after A code of each composite, null where it has none (left out).
 * @returns Null with fewer than two composites coded in both.
 * @throws {KernelError} `shape`.
 */
export function codingAgreement(
  before: readonly (string | null)[],
  after: readonly (string | null)[],
): number | null {
  const labelsOf = (codes: readonly (string | null)[]) => {
    const place = new Map(
      [...new Set(codes.filter((code) => code !== null))].map((code, i) => [code, i + 1]),
    );
    return codes.map((code) => (code === null ? 0 : (place.get(code) ?? 0)));
  };
  return adjustedRandIndex(labelsOf(before), labelsOf(after));
}
