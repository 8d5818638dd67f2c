import { KernelError } from '#kernels/kernel-error.ts';
import { withLab } from '#kernels/dense/lab.ts';
import { BLOCK_ROWS, densityTables, fillBlock, mixtureBlock, mixtureBlockBytes } from './mixture-block.ts';
import { mixtureDensity, type MixtureModel } from './mixture-model.ts';
import { packPoints, type PackedPoints } from './points.ts';

/** Membership of rows in the groups of a mixture. */
export interface MixtureMembership {
  /** Row-major, shape (n, K): probability of each group, rows sum to 1; NaN where a coordinate is missing. */
  responsibilities: Float64Array;
  /** 1..K per row, the likeliest group; 0 = a coordinate is missing. */
  labels: Uint8Array;
  /** Probability of that group, [1/K, 1]; NaN where a coordinate is missing. */
  own: Float64Array;
  /** -Σ w Σ r ln r over the rows (w 1 unless weighted), >= 0. */
  entropy: number;
}

/**
 * Membership of rows in a frozen mixture; nothing is fitted.
 *
 * @param columns p columns of n rows in the space of the model; NaN = missing.
 * @throws {KernelError} `shape` when p differs; `singular`; those of `packPoints`.
 */
export function mixtureMembership(
  model: MixtureModel,
  columns: readonly Float64Array[],
): MixtureMembership {
  if (columns.length !== model.p)
    throw new KernelError('shape', `expected ${model.p} columns, found ${columns.length}`);
  return membershipOfPacked(model, packPoints(columns), columns[0]?.length ?? 0, null);
}

/** {@link mixtureMembership} of rows packed before; `weights`, one per packed row, count in the entropy. */
export function membershipOfPacked(
  model: MixtureModel,
  { points, n, rowOf }: PackedPoints,
  nRows: number,
  weights: Float64Array | null,
): MixtureMembership {
  const density = mixtureDensity(model);
  const { k, p } = model;
  const out = {
    responsibilities: new Float64Array(nRows * k).fill(NaN),
    labels: new Uint8Array(nRows),
    own: new Float64Array(nRows).fill(NaN),
    entropy: 0,
  };
  withLab(mixtureBlockBytes(k, p), (lab) => {
    const block = mixtureBlock(lab, k, p);
    const tables = densityTables(lab, density);
    for (let from = 0; from < n; from += BLOCK_ROWS) {
      const count = Math.min(BLOCK_ROWS, n - from);
      fillBlock(block, points, from, count);
      lab.math.mixtureShares(block, count, tables);
      for (let r = 0; r < count; r++) {
        const row = rowOf ? rowOf[from + r]! : from + r;
        takeRow(out, block.shares, r, row, k, weights ? weights[from + r]! : 1);
      }
    }
  });
  return out;
}

function takeRow(
  out: MixtureMembership,
  shares: Float64Array,
  r: number,
  row: number,
  k: number,
  weight: number,
): void {
  let best = 0;
  for (let c = 0; c < k; c++) {
    const share = shares[c * BLOCK_ROWS + r]!;
    out.responsibilities[row * k + c] = share;
    if (share > 0) out.entropy -= weight * share * Math.log(share);
    if (share > shares[best * BLOCK_ROWS + r]!) best = c;
  }
  out.labels[row] = best + 1;
  out.own[row] = shares[best * BLOCK_ROWS + r]!;
}

/** Memberships with the groups in a new order, changed in place: `order[new] = old`. */
export function reorderMembership({ responsibilities, labels }: MixtureMembership, order: readonly number[]): void {
  const k = order.length;
  const placeOf = Uint8Array.from(order, (_, old) => order.indexOf(old) + 1);
  const row = new Float64Array(k);
  for (let i = 0; i < labels.length; i++) {
    for (let c = 0; c < k; c++) row[c] = responsibilities[i * k + order[c]!]!;
    responsibilities.set(row, i * k);
    if (labels[i]! > 0) labels[i] = placeOf[labels[i]! - 1]!;
  }
}

/** The model with its groups in a new order: `order[new] = old`. */
export function reorderMixture(model: MixtureModel, order: readonly number[]): MixtureModel {
  const take = (values: Float64Array): Float64Array => {
    const width = values.length / model.k;
    return Float64Array.from(
      order.flatMap((c) => Array.from(values.subarray(c * width, (c + 1) * width))),
    );
  };
  return {
    ...model,
    shares: take(model.shares),
    means: take(model.means),
    covariances: take(model.covariances),
  };
}
