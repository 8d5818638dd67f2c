import { expect } from 'vitest';
import * as z from 'zod';
import {
  loadReference,
  REFERENCE_SETS,
  type ReferenceCheck,
  type ReferenceValue,
} from './reference.ts';

/** A result in the shape of the expected value; typed arrays count as lists. */
export type ReferenceResult =
  number | null | ArrayLike<ReferenceResult> | { [name: string]: ReferenceResult };

/** Fails the test unless a result agrees with the check under the check's own tolerance rule. */
export function expectWithin(check: ReferenceCheck, result: ReferenceResult): void {
  const { compare, abs, rel, min_ari } = check.tolerance;
  const label = `${check.id} (${check.software})`;
  const got = plain(result);
  switch (compare) {
    case 'close':
    case 'exact':
      return expectClose(label, got, check.value, abs, rel);
    case 'close_up_to_column_sign':
      return expectCloseUpToSign(label, got, check.value, abs, rel);
    case 'at_most':
      return expect(numeric(got), label).toBeLessThanOrEqual(limit(check.value, abs, rel, 1));
    case 'at_least':
      return expect(numeric(got), label).toBeGreaterThanOrEqual(limit(check.value, abs, rel, -1));
    case 'mixture_loglik':
      return expect(loglik(got), label).toBeGreaterThanOrEqual(loglik(check.value) - abs);
    case 'partition':
      return expect(adjustedRand(labels(got), labels(check.value)), label).toBeCloseTo(1, 12);
    case 'partition_ari_at_least':
      return expect(adjustedRand(labels(got), labels(check.value)), label).toBeGreaterThanOrEqual(
        min_ari ?? 1,
      );
    case 'partition_core_points':
      return expectCorePartition(label, check, labels(got));
  }
}

function isList(value: ReferenceResult): value is ArrayLike<ReferenceResult> {
  return Array.isArray(value) || ArrayBuffer.isView(value);
}

function plain(value: ReferenceResult): ReferenceValue {
  if (value === null || typeof value === 'number') return value;
  if (isList(value)) return Array.from(value, plain);
  return Object.fromEntries(Object.entries(value).map(([name, item]) => [name, plain(item)]));
}

const numeric = (value: ReferenceValue): number =>
  z.union([z.number(), z.nan()]).parse(unwrapped(value));
const labels = (value: ReferenceValue): number[] => z.array(z.number()).parse(value);
const unwrapped = (value: ReferenceValue): ReferenceValue =>
  Array.isArray(value) && value.length === 1 ? (value[0] ?? null) : value;

function limit(value: ReferenceValue, abs: number, rel: number, side: 1 | -1): number {
  const target = numeric(value);
  return target + side * (abs + rel * Math.abs(target));
}

function loglik(value: ReferenceValue): number {
  if (typeof value === 'number') return value;
  return z.looseObject({ loglik: z.number() }).parse(value).loglik;
}

/** Same shape and every number near; a list of one and a plain number are the same thing. */
function expectClose(
  label: string,
  got: ReferenceValue,
  value: ReferenceValue,
  abs: number,
  rel: number,
): void {
  if (Array.isArray(value) && Array.isArray(got)) {
    expect(got.length, `${label}: length`).toBe(value.length);
    value.forEach((item, i) => expectClose(`${label}[${i}]`, got[i] ?? null, item, abs, rel));
  } else if (value !== null && typeof value === 'object' && !Array.isArray(value)) {
    const fields = z.record(z.string(), z.unknown()).parse(got);
    expect(Object.keys(fields).sort(), `${label}: fields`).toEqual(Object.keys(value).sort());
    if (got === null || typeof got === 'number' || Array.isArray(got)) return;
    for (const name of Object.keys(value)) {
      expectClose(`${label}.${name}`, got[name] ?? null, value[name] ?? null, abs, rel);
    }
  } else {
    expectNear(label, unwrapped(got), unwrapped(value), abs, rel);
  }
}

function expectNear(
  label: string,
  got: ReferenceValue,
  value: ReferenceValue,
  abs: number,
  rel: number,
): void {
  const found = got === null ? NaN : numeric(got);
  if (value === null) return expect(found, label).toBeNaN();
  const target = numeric(value);
  expect(found, `${label}: expected ${target}, found ${found}`).toSatisfy(
    (x: number) => Math.abs(x - target) <= abs + rel * Math.abs(target),
  );
}

function expectCloseUpToSign(
  label: string,
  got: ReferenceValue,
  value: ReferenceValue,
  abs: number,
  rel: number,
): void {
  const Grid = z.union([
    z.array(z.array(z.number())),
    z.array(z.number()).transform((column) => column.map((x) => [x])),
  ]);
  const [found, target] = [Grid.parse(got), Grid.parse(value)];
  expect(
    found.map((row) => row.length),
    `${label}: shape`,
  ).toEqual(target.map((row) => row.length));
  for (const col of (target[0] ?? []).keys()) {
    const signs = [1, -1].filter((sign) =>
      target.every((row, r) => {
        const want = row[col] ?? NaN;
        return Math.abs(sign * (found[r]?.[col] ?? NaN) - want) <= abs + rel * Math.abs(want);
      }),
    );
    expect(signs, `${label}: column ${col} with either sign`).not.toHaveLength(0);
  }
}

function expectCorePartition(label: string, check: ReferenceCheck, got: number[]): void {
  const coreId = check.id.replace(/[^.]+$/, 'core');
  const owner = REFERENCE_SETS.map(loadReference).find((set) => set.checks.includes(check));
  if (!owner) throw new Error(`${check.id} was not read by loadReference`);
  const core = labels(owner.check(coreId).value);
  const want = labels(check.value);
  const isCore = (_: number, i: number) => core[i] === 1;
  expect(
    got.map((x) => x === 0),
    `${label}: noise rows`,
  ).toEqual(want.map((x) => x === 0));
  expect(adjustedRand(got.filter(isCore), want.filter(isCore)), label).toBeCloseTo(1, 12);
}

/** Adjusted Rand index of two labelings (Hubert & Arabie 1985), 1 for the same grouping. */
function adjustedRand(a: number[], b: number[]): number {
  expect(a.length, 'number of labels').toBe(b.length);
  const pairs = (counts: Map<string, number>) =>
    [...counts.values()].reduce((sum, n) => sum + (n * (n - 1)) / 2, 0);
  const count = (keys: string[]) => {
    const counts = new Map<string, number>();
    for (const key of keys) counts.set(key, (counts.get(key) ?? 0) + 1);
    return pairs(counts);
  };
  const both = count(a.map((x, i) => `${x}|${b[i]}`));
  const inA = count(a.map(String));
  const inB = count(b.map(String));
  const expected = (inA * inB) / ((a.length * (a.length - 1)) / 2);
  const ceiling = (inA + inB) / 2;
  return ceiling === expected ? 1 : (both - expected) / (ceiling - expected);
}
