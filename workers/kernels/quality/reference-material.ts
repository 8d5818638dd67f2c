import { KernelError } from '#kernels/kernel-error.ts';
import { requireFinite } from '#kernels/statistics/require-finite.ts';
import { studentTwoSided } from '#kernels/tables/special-functions.ts';

/** What a reference material is certified for. */
export interface Certificate {
  name: string;
  /** Certified value, in the unit of the results. */
  value: number;
  /** Sd between laboratories, or that of the site once twenty results stand behind it. */
  sd: number;
}

export type ControlRule = 'beyond-3-sd' | 'two-beyond-2-sd' | 'beyond-2-sd' | 'eight-on-one-side';

/** A rule that results of a material break: the first and the last result it rests on. */
export interface RuleHit {
  rule: ControlRule;
  from: number;
  to: number;
  side: 1 | -1;
}

/** Results of one reference material read against its certificate. */
export interface ControlReading {
  /** (x - certified value) / sd, in order; NaN where missing. */
  z: Float64Array;
  /** Per result: 0 in control or missing, 1 a warning, 2 a failure. */
  status: Uint8Array;
  hits: RuleHit[];
  nUsed: number;
  nMissing: number;
  nFailed: number;
}

/** Status of a result on a control chart. */
export const CONTROL_STATUS = { inControl: 0, warning: 1, failure: 2 } as const;

/** Results in a row on one side of the certified value that tell a bias. */
const RUN_LENGTH = 8;

/**
 * Control rules for one reference material. A result beyond 3 sd fails; two in a row beyond 2 sd on
 * one side fail; one beyond 2 sd warns; eight in a row on one side tell a bias. Of results in
 * control 4.6 % pass 2 sd and 0.27 % pass 3 sd by chance.
 *
 * @param results In order of date, one unit; NaN where missing. Not modified.
 * @throws {KernelError} `too-few-rows` without a result; `not-finite` with { row } at an infinity;
 *   `bad-parameter` for a certificate without a value > 0 and sd > 0.
 * @see Shewhart (1931); Westgard et al. (1981), Clin. Chem. 27 (from memory).
 */
export function controlRules(results: Float64Array, certificate: Certificate): ControlReading {
  requireCertificate(certificate);
  const used = Uint32Array.from(results.keys()).filter((row) => !Number.isNaN(results[row]));
  requireFinite(
    Float64Array.from(used, (row) => results[row]!),
    'results',
  );
  const z = results.map((value) => (value - certificate.value) / certificate.sd);
  const hits = [...pointHits(z, used), ...runHits(z, used)];
  const status = new Uint8Array(results.length);
  for (const { rule, from, to } of hits) {
    const isFailure = rule === 'beyond-3-sd' || rule === 'two-beyond-2-sd';
    for (const row of used) {
      if (row < from || row > to) continue;
      status[row] = Math.max(
        status[row]!,
        isFailure ? CONTROL_STATUS.failure : CONTROL_STATUS.warning,
      );
    }
  }
  hits.sort((a, b) => a.from - b.from || a.to - b.to);
  return {
    z,
    status,
    hits,
    nUsed: used.length,
    nMissing: results.length - used.length,
    nFailed: status.filter((value) => value === CONTROL_STATUS.failure).length,
  };
}

/** Single results, and pairs of neighbours: each result beyond 2 sd is named by its gravest rule. */
function pointHits(z: Float64Array, used: Uint32Array): RuleHit[] {
  return Array.from(used).flatMap((row, i): RuleHit[] => {
    const value = z[row]!;
    const side = value > 0 ? 1 : -1;
    const before = i > 0 ? used[i - 1]! : null;
    const hits: RuleHit[] = [];
    if (Math.abs(value) > 3) hits.push({ rule: 'beyond-3-sd', from: row, to: row, side });
    if (before !== null && side * value > 2 && side * z[before]! > 2) {
      hits.push({ rule: 'two-beyond-2-sd', from: before, to: row, side });
    }
    if (hits.length === 0 && Math.abs(value) > 2) {
      hits.push({ rule: 'beyond-2-sd', from: row, to: row, side });
    }
    return hits;
  });
}

/** Whole stretches of eight or more on one side; a result on the value itself ends a stretch. */
function runHits(z: Float64Array, used: Uint32Array): RuleHit[] {
  const hits: RuleHit[] = [];
  let start = 0;
  for (let end = 1; end <= used.length; end++) {
    const side = Math.sign(z[used[start]!]!);
    if (end < used.length && Math.sign(z[used[end]!]!) === side) continue;
    const first = start;
    start = end;
    if (side === 0 || end - first < RUN_LENGTH) continue;
    const [from, to] = [used[first]!, used[end - 1]!];
    hits.push({ rule: 'eight-on-one-side', from, to, side: side > 0 ? 1 : -1 });
  }
  return hits;
}

/** How far the mean of a material lies off its certified value. */
export interface MaterialBias {
  n: number;
  mean: number;
  sd: number;
  /** 100 (mean / certified value - 1), %. */
  biasPercent: number;
  /** (mean - certified value) / (sd / sqrt(n)); null, with p 0, when results do not vary but are off. */
  t: number | null;
  /** Two-sided Student p with n - 1 degrees of freedom, for independent results: nominal. */
  nominalP: number;
}

/**
 * Bias of a reference material.
 *
 * @param results At least two, one unit; NaN where missing. Not modified.
 * @throws {KernelError} `too-few-rows`; `not-finite`; `bad-parameter` for a certified value that is
 *   not > 0.
 */
export function materialBias(results: Float64Array, certifiedValue: number): MaterialBias {
  if (!(certifiedValue > 0 && certifiedValue < Infinity)) {
    const message = `expected a certified value > 0, found ${certifiedValue}`;
    throw new KernelError('bad-parameter', message);
  }
  const { n, mean, sd } = momentsOf(results, 2);
  const away = mean - certifiedValue;
  const biasPercent = 100 * (mean / certifiedValue - 1);
  if (sd === 0 && away !== 0) return { n, mean, sd, biasPercent, t: null, nominalP: 0 };
  const t = away === 0 ? 0 : away / (sd / Math.sqrt(n));
  return { n, mean, sd, biasPercent, t, nominalP: studentTwoSided(t, n - 1) };
}

/** Results that must stand behind a sd of the site's own. */
export const FEWEST_FOR_SITE_SD = 20;

/**
 * Certificate with the sd of the site's own results in place of that between laboratories.
 *
 * @param results Of the same material, in control; NaN where missing. Not modified.
 * @throws {KernelError} `too-few-rows` under twenty; `not-finite`; `singular` when they do not vary.
 */
export function withSiteSd(certificate: Certificate, results: Float64Array): Certificate {
  const { sd } = momentsOf(results, FEWEST_FOR_SITE_SD);
  if (!(sd > 0)) throw new KernelError('singular', 'expected results that vary, found one value');
  return { ...certificate, sd };
}

/**
 * Other materials a failing result would fit: the sample may have been swapped.
 *
 * @returns Names of those whose certified value lies within 3 of their sds, the nearest first.
 * @throws {KernelError} `bad-parameter` for a certificate; `not-finite` for the result.
 */
export function swapCandidates(result: number, others: readonly Certificate[]): string[] {
  if (!Number.isFinite(result)) {
    throw new KernelError('not-finite', `expected a finite result, found ${result}`);
  }
  others.forEach(requireCertificate);
  const off = ({ value, sd }: Certificate) => Math.abs(result - value) / sd;
  return others
    .filter((certificate) => off(certificate) <= 3)
    .sort((a, b) => off(a) - off(b))
    .map(({ name }) => name);
}

function momentsOf(results: Float64Array, fewest: number) {
  const values = results.filter((value) => !Number.isNaN(value));
  const n = values.length;
  if (n < fewest) {
    const message = `expected at least ${fewest} results, found ${n}`;
    throw new KernelError('too-few-rows', message, { found: n });
  }
  requireFinite(values, 'results');
  const mean = values.reduce((sum, value) => sum + value, 0) / n;
  const squares = values.reduce((sum, value) => sum + (value - mean) ** 2, 0);
  const isConstant = values.every((value) => value === values[0]);
  if (isConstant) return { n, mean: values[0]!, sd: 0 };
  return { n, mean, sd: Math.sqrt(squares / (n - 1)) };
}

function requireCertificate({ name, value, sd }: Certificate): void {
  if (value > 0 && value < Infinity && sd > 0 && sd < Infinity) return;
  const message = `${name}: expected a certified value and sd > 0, found ${value} and ${sd}`;
  throw new KernelError('bad-parameter', message);
}
