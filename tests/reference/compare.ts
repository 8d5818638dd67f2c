import * as z from 'zod';
import type { ReferenceCheck, ReferenceSet, ReferenceValue } from '#tests/support/reference.ts';
import { adjustedRand } from './adjusted-rand.ts';

/** A result in the shape of the expected value; typed arrays count as lists. */
export type ReferenceResult =
  number | null | ArrayLike<ReferenceResult> | { [name: string]: ReferenceResult };

/** A place where a result falls short of its check. */
export interface Shortfall {
  /** Path inside the value, such as `[2].p`; empty for the whole. */
  where: string;
  expected: string;
  found: string;
}

interface Limits {
  abs: number;
  rel: number;
}

/**
 * Where a result falls short of a check under the check's own rule (README beside the sets); none when
 * it agrees. A result of another shape than the rule needs falls short too.
 *
 * @param set The set of the check; only `partition_core_points` reads it, for the core points of a
 *   sister check.
 */
export function shortfalls(
  set: ReferenceSet | undefined,
  check: ReferenceCheck,
  result: ReferenceResult,
): Shortfall[] {
  const { value, tolerance } = check;
  const found = plain(result);
  switch (tolerance.compare) {
    case 'close':
    case 'exact':
      return closeShortfalls('', found, value, tolerance);
    case 'close_up_to_column_sign':
      return signedShortfalls(found, value, tolerance);
    case 'at_most':
      return boundShortfalls(numberOf(found), value, tolerance, 1);
    case 'at_least':
      return boundShortfalls(numberOf(found), value, tolerance, -1);
    case 'mixture_loglik':
      return boundShortfalls(logLikOf(found), logLikOf(value), { ...tolerance, rel: 0 }, -1);
    case 'partition':
      return partitionShortfalls(listOf(found), listOf(value), 1 - 1e-12);
    case 'partition_ari_at_least':
      return partitionShortfalls(listOf(found), listOf(value), tolerance.min_ari ?? 1);
    case 'partition_core_points': {
      if (!set) throw new Error(`${check.id}: its set is not known`);
      const core = listOf(set.check(check.id.replace(/[^.]+$/, 'core')).value);
      return coreShortfalls(listOf(found), listOf(value), core);
    }
  }
}

/** A value as short text for a message. */
export function shown(value: ReferenceResult | undefined): string {
  const text = JSON.stringify(plain(value ?? null), (_, item: unknown) =>
    typeof item === 'number' && !Number.isFinite(item) ? String(item) : item,
  );
  return text.length > 90 ? `${text.slice(0, 87)}...` : text;
}

function plain(value: ReferenceResult): ReferenceValue {
  if (value === null || typeof value === 'number') return value;
  if (isList(value)) return Array.from(value, plain);
  return Object.fromEntries(Object.entries(value).map(([name, item]) => [name, plain(item)]));
}

function isList(value: ReferenceResult): value is ArrayLike<ReferenceResult> {
  return Array.isArray(value) || ArrayBuffer.isView(value);
}

/** A list of one and a plain number are the same thing. */
const unwrapped = (value: ReferenceValue): ReferenceValue =>
  Array.isArray(value) && value.length === 1 ? (value[0] ?? null) : value;

function numberOf(value: ReferenceValue): number {
  const single = unwrapped(value);
  return typeof single === 'number' ? single : NaN;
}

function logLikOf(value: ReferenceValue): number {
  const isRecord = value !== null && typeof value === 'object' && !Array.isArray(value);
  return numberOf(isRecord ? (value['loglik'] ?? null) : value);
}

const listOf = (value: ReferenceValue): number[] =>
  z.array(z.union([z.number(), z.nan()])).parse(Array.isArray(value) ? value : [value]);

function isNear(found: number, value: number, { abs, rel }: Limits): boolean {
  return Math.abs(found - value) <= abs + rel * Math.abs(value);
}

/**
 * Same shape and every number near; null agrees with null and NaN only. Of named fields those of the
 * value count: a result may hold more.
 */
function closeShortfalls(
  where: string,
  found: ReferenceValue,
  value: ReferenceValue,
  limits: Limits,
): Shortfall[] {
  const fail = (expected: string, was: string) => [{ where, expected, found: was }];
  if (Array.isArray(value) && Array.isArray(found)) {
    if (found.length !== value.length)
      return fail(`${value.length} entries`, `${found.length} entries`);
    return value.flatMap((item, i) =>
      closeShortfalls(`${where}[${i}]`, found[i] ?? null, item, limits),
    );
  }
  if (isFields(value)) {
    if (!isFields(found)) return fail(`fields ${Object.keys(value).join(', ')}`, shown(found));
    return Object.entries(value).flatMap(([name, item]) => {
      const got = found[name];
      const at = `${where}.${name}`;
      return got === undefined
        ? [{ where: at, expected: shown(item), found: 'no such field' }]
        : closeShortfalls(at, got, item, limits);
    });
  }
  const [got, want] = [unwrapped(found), unwrapped(value)];
  const agrees =
    typeof want === 'number'
      ? typeof got === 'number' && isNear(got, want, limits)
      : want === null && (got === null || Number.isNaN(got));
  return agrees ? [] : fail(shown(want), shown(got));
}

function isFields(value: ReferenceValue): value is { [name: string]: ReferenceValue } {
  return value !== null && typeof value === 'object' && !Array.isArray(value);
}

const Grid = z.union([
  z.array(z.array(z.number())),
  z.array(z.number()).transform((column) => column.map((x) => [x])),
]);

/** As close, but each column may be multiplied by -1. A plain list is one column. */
function signedShortfalls(
  found: ReferenceValue,
  value: ReferenceValue,
  limits: Limits,
): Shortfall[] {
  const target = Grid.parse(value);
  const grid = Grid.safeParse(found);
  const shape = (rows: number[][]) => `rows of ${[...new Set(rows.map((r) => r.length))].join()}`;
  const size = (rows: number[][]) => `${rows.length} ${shape(rows)}`;
  if (!grid.success) return [{ where: '', expected: size(target), found: shown(found) }];
  if (size(grid.data) !== size(target))
    return [{ where: '', expected: size(target), found: size(grid.data) }];
  return [...(target[0] ?? []).keys()].flatMap((col) => {
    const pick = (rows: number[][]) => rows.map((row) => row[col] ?? NaN);
    const [got, want] = [pick(grid.data), pick(target)];
    const agrees = [1, -1].some((sign) => want.every((x, r) => isNear(sign * got[r]!, x, limits)));
    return agrees ? [] : [{ where: `column ${col}`, expected: shown(want), found: shown(got) }];
  });
}

/** Side 1: not above the value and its tolerance; side -1: not below. */
function boundShortfalls(
  found: number,
  value: ReferenceValue,
  { abs, rel }: Limits,
  side: 1 | -1,
): Shortfall[] {
  const target = numberOf(value);
  const limit = target + side * (abs + rel * Math.abs(target));
  if (side * found <= side * limit) return [];
  const words = side === 1 ? 'at most' : 'at least';
  return [{ where: '', expected: `${words} ${limit}`, found: String(found) }];
}

function partitionShortfalls(found: number[], value: number[], least: number): Shortfall[] {
  if (found.length !== value.length) {
    return [{ where: '', expected: `${value.length} labels`, found: `${found.length} labels` }];
  }
  const agreement = adjustedRand(found, value);
  if (agreement >= least) return [];
  const expected = least > 0.999999 ? 'the same grouping' : `adjusted Rand at least ${least}`;
  return [{ where: '', expected, found: `adjusted Rand ${agreement}` }];
}

/** The same noise rows, and the same grouping of the core points. */
function coreShortfalls(found: number[], value: number[], core: number[]): Shortfall[] {
  const noise = (labels: number[]) =>
    labels.flatMap((label, row) => (label === 0 ? [row + 1] : []));
  const [got, want] = [noise(found), noise(value)];
  if (got.join() !== want.join())
    return [{ where: 'noise rows', expected: shown(want), found: shown(got) }];
  const ofCore = (labels: number[]) => labels.filter((_, row) => core[row] === 1);
  return partitionShortfalls(ofCore(found), ofCore(value), 1 - 1e-12);
}
