import { KernelError } from '#kernels/kernel-error.ts';
import type { CompositePlan } from './composite-plan.ts';

/** Grades of one element on the source intervals. */
export interface SourceGrade {
  /** One per interval, ppm; NaN where not assayed. Replace values below detection first. */
  valuesPpm: Float64Array;
  /** 1 where the value replaces one below detection. */
  isReplaced?: Uint8Array;
}

export interface GradeRules {
  /** Share of a composite that must be assayed for it to have a grade. */
  leastAssayedShare?: number;
  /** Density of each interval (t/m3): weights lengths, where units differ in density. */
  densityTPerM3?: Float64Array;
  /** Domains in which an interval without an assay counts as grade 0: only by explicit choice. */
  barrenDomains?: ReadonlySet<number>;
}

/** Grades of one element on composites; metal is grade x metres (x density when given). */
export interface CompositeGrade {
  /** Weighted arithmetic mean, ppm; NaN where too little is assayed. Take logs after, not before. */
  valuesPpm: Float64Array;
  assayedShare: Float64Array;
  /** Share of the assayed length whose grade was a replacement. */
  replacedShare: Float64Array;
  /** Sum of length x density x grade of the assayed pieces. */
  metal: Float64Array;
  /** Metal of composites with a grade; withheld, as too little was assayed; and outside composites. */
  keptMetal: number;
  withheld: { count: number; assayedM: number; metal: number };
  outside: { assayedM: number; metal: number };
}

/**
 * Grade of each composite of a plan: sum(l g) / sum(l) over its assayed pieces, or sum(l d g) / sum(l
 * d) with densities. Metal is conserved: kept, withheld and outside add up to that of the intervals.
 *
 * @throws {KernelError} `shape`; `bad-parameter` with { row } at a grade that is negative or infinite
 *   or an assayed interval without a density > 0, or at a share outside [0, 1].
 */
export function compositeGrade(
  plan: CompositePlan,
  grade: SourceGrade,
  rules: GradeRules = {},
): CompositeGrade {
  const { leastAssayedShare = 0.5, densityTPerM3, barrenDomains } = rules;
  if (!(leastAssayedShare >= 0 && leastAssayedShare <= 1)) {
    const message = `expected a share in [0, 1], found ${leastAssayedShare}`;
    throw new KernelError('bad-parameter', message);
  }
  checkGrade(plan, grade, densityTPerM3);
  const count = plan.fromM.length;
  const sums = {
    assayedM: new Float64Array(count),
    replacedM: new Float64Array(count),
    weight: new Float64Array(count),
  };
  const out = emptyGrade(count);
  for (let piece = 0; piece < plan.pieceM.length; piece++) {
    const row = plan.pieceRow[piece]!;
    const composite = plan.pieceComposite[piece]!;
    const isBarren = composite >= 0 && barrenDomains?.has(plan.domain[composite]!) === true;
    const given = grade.valuesPpm[row]!;
    const value = Number.isNaN(given) && isBarren ? 0 : given;
    if (Number.isNaN(value)) continue;
    const lengthM = plan.pieceM[piece]!;
    const share = lengthM * (densityTPerM3 ? densityOf(densityTPerM3, row) : 1);
    if (composite < 0) {
      out.outside.assayedM += lengthM;
      out.outside.metal += share * value;
      continue;
    }
    sums.assayedM[composite]! += lengthM;
    if (grade.isReplaced?.[row] === 1) sums.replacedM[composite]! += lengthM;
    sums.weight[composite]! += share;
    out.metal[composite]! += share * value;
  }
  settle(plan, out, sums, leastAssayedShare);
  return out;
}

/** Turns the sums of each composite into its grade and shares, or withholds the grade. */
function settle(
  { fromM, toM }: CompositePlan,
  out: CompositeGrade,
  sums: { assayedM: Float64Array; replacedM: Float64Array; weight: Float64Array },
  leastAssayedShare: number,
): void {
  for (let i = 0; i < fromM.length; i++) {
    const assayed = sums.assayedM[i]!;
    out.assayedShare[i] = Math.min(1, assayed / (toM[i]! - fromM[i]!));
    if (assayed > 0) out.replacedShare[i] = Math.min(1, sums.replacedM[i]! / assayed);
    if (assayed > 0 && out.assayedShare[i]! >= leastAssayedShare - 1e-9) {
      out.valuesPpm[i] = out.metal[i]! / sums.weight[i]!;
      out.keptMetal += out.metal[i]!;
    } else {
      out.withheld.count++;
      out.withheld.assayedM += assayed;
      out.withheld.metal += out.metal[i]!;
    }
  }
}

function emptyGrade(count: number): CompositeGrade {
  return {
    valuesPpm: new Float64Array(count).fill(NaN),
    assayedShare: new Float64Array(count),
    replacedShare: new Float64Array(count),
    metal: new Float64Array(count),
    keptMetal: 0,
    withheld: { count: 0, assayedM: 0, metal: 0 },
    outside: { assayedM: 0, metal: 0 },
  };
}

function densityOf(densities: Float64Array, row: number): number {
  const density = densities[row]!;
  if (density > 0 && density < Infinity) return density;
  const message = `expected a density > 0 t/m3 of an assayed interval, found ${density} in row ${row}`;
  throw new KernelError('bad-parameter', message, { row });
}

function checkGrade(
  { pieceRow }: CompositePlan,
  { valuesPpm, isReplaced }: SourceGrade,
  density: Float64Array | undefined,
): void {
  const n = valuesPpm.length;
  const isShort = pieceRow.some((row) => row >= n);
  if (isShort || (isReplaced ?? valuesPpm).length !== n || (density ?? valuesPpm).length !== n) {
    const found = [n, isReplaced?.length ?? n, density?.length ?? n].join(', ');
    throw new KernelError('shape', `expected one value per interval, found ${found}`);
  }
  valuesPpm.forEach((value, row) => {
    if (!(value < 0) && value !== Infinity) return;
    throw new KernelError('bad-parameter', `expected ppm >= 0, found ${value} in row ${row}`, {
      row,
    });
  });
}
