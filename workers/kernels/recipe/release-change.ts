import { adjustedRandIndex } from '#kernels/clustering/agreement.ts';
import { compareCodePoints } from '#kernels/tables/category.ts';
import type { CodedInterval } from './code-lines.ts';
import { crossReleases, type ReleasePiece } from './release-pieces.ts';

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
  for (const piece of pieces) {
    const metres = piece.toM - piece.fromM;
    addToDomains(domains, piece, metres);
    if (piece.before === null || piece.after === null) continue;
    const key = JSON.stringify([piece.before, piece.after]);
    const cell = cells.get(key) ?? { before: piece.before, after: piece.after, metres: 0 };
    cell.metres += metres;
    cells.set(key, cell);
  }
  const table = [...cells.values()].sort(
    (a, b) => compareCodePoints(a.before, b.before) || compareCodePoints(a.after, b.after),
  );
  const changes = [...domains.values()].sort((a, b) => compareCodePoints(a.code, b.code));
  const commonMetres = table.reduce((sum, { metres }) => sum + metres, 0);
  const movedMetres = table.reduce((sum, c) => (c.before === c.after ? sum : sum + c.metres), 0);
  return {
    commonMetres,
    addedMetres: changes.reduce((sum, { addedMetres }) => sum + addedMetres, 0),
    removedMetres: changes.reduce((sum, { removedMetres }) => sum + removedMetres, 0),
    movedShare: commonMetres > 0 ? movedMetres / commonMetres : null,
    table,
    domains: changes,
  };
}

function addToDomains(
  domains: Map<string, DomainChange>,
  { before, after }: ReleasePiece,
  metres: number,
): void {
  const domain = (code: string): DomainChange => {
    const none = {
      metresBefore: 0,
      metresAfter: 0,
      keptMetres: 0,
      addedMetres: 0,
      removedMetres: 0,
    };
    const found = domains.get(code) ?? { code, ...none };
    domains.set(code, found);
    return found;
  };
  if (before !== null) domain(before).metresBefore += metres;
  if (after !== null) domain(after).metresAfter += metres;
  if (before !== null && before === after) domain(before).keptMetres += metres;
  if (before === null && after !== null) domain(after).addedMetres += metres;
  if (after === null && before !== null) domain(before).removedMetres += metres;
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
