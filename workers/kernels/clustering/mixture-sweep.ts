import { KernelError } from '#kernels/kernel-error.ts';
import {
  gaussianMixture,
  type GaussianMixture,
  type GaussianMixtureInput,
} from './gaussian-mixture.ts';
import {
  COVARIANCE_FAMILIES,
  mixtureParameterCount,
  type CovarianceFamily,
} from './mixture-model.ts';

/** Input of `sweepMixtures`: that of `gaussianMixture` for several k and families. */
export interface MixtureSweepInput extends Omit<GaussianMixtureInput, 'k' | 'family'> {
  /** Default 1 to 10. */
  kFrom?: number | undefined;
  kTo?: number | undefined;
  /** Default all four. */
  families?: readonly CovarianceFamily[] | undefined;
}

/** Criteria of one model; lower BIC and ICL are better. */
export interface MixtureSweepRow {
  family: CovarianceFamily;
  k: number;
  parameters: number;
  /** Null when the model was refused. */
  logLik: number | null;
  bic: number | null;
  icl: number | null;
  /** Why it was refused (too few rows), or null. */
  refused: string | null;
}

/** Models side by side and the one of least BIC. */
export interface MixtureSweep {
  rows: MixtureSweepRow[];
  /** Of least BIC (ties: the earlier row). */
  best: GaussianMixture;
  /** Row of least ICL, which also asks the groups to stand apart. */
  leastIcl: MixtureSweepRow;
}

/**
 * Mixtures of several numbers of groups and families with BIC and ICL. A model the rows do not suffice
 * for is listed with the reason and left out: so a full family that is too large falls back to the
 * others in sight of everybody.
 *
 * @throws {KernelError} `bad-parameter` unless 1 <= kFrom <= kTo <= 250 and there is a family;
 *   `too-few-rows` when every model was refused; those of `gaussianMixture`.
 */
export function sweepMixtures(input: MixtureSweepInput): MixtureSweep {
  const { kFrom = 1, kTo = 10, families = COVARIANCE_FAMILIES, onProgress, ...shared } = input;
  const isRange =
    kFrom >= 1 && kFrom <= kTo && kTo <= 250 && Number.isInteger(kFrom) && Number.isInteger(kTo);
  if (!isRange || families.length === 0) {
    const message = `expected whole numbers 1 <= kFrom <= kTo <= 250 and a family, found ${kFrom}, ${kTo} and ${families.length} families`;
    throw new KernelError('bad-parameter', message);
  }
  const tasks = families.flatMap((family) =>
    Array.from({ length: kTo - kFrom + 1 }, (_, i) => ({ family, k: kFrom + i })),
  );
  const rows: MixtureSweepRow[] = [];
  let best: GaussianMixture | undefined;
  for (const [done, task] of tasks.entries()) {
    const report = (share: number) => onProgress?.((done + share) / tasks.length);
    const found = fitOrReason({ ...shared, ...task, onProgress: report });
    if (typeof found === 'string') rows.push(refusedRow(task, input.columns.length, found));
    else {
      const { parameters, logLik, bic, icl } = found;
      rows.push({ ...task, parameters, logLik, bic, icl, refused: null });
      if (!best || bic < best.bic) best = found;
    }
    report(1);
  }
  const leastIcl = rows.reduce((a, b) => ((b.icl ?? Infinity) < (a.icl ?? Infinity) ? b : a));
  if (!best)
    throw new KernelError(
      'too-few-rows',
      `none of ${rows.length} models has rows enough: ${rows[0]?.refused}`,
    );
  return { rows, best, leastIcl };
}

function refusedRow(
  { family, k }: { family: CovarianceFamily; k: number },
  p: number,
  refused: string,
): MixtureSweepRow {
  const parameters = mixtureParameterCount(family, k, p);
  return { family, k, parameters, logLik: null, bic: null, icl: null, refused };
}

/** The fitted mixture, or why the rows do not suffice for it. */
function fitOrReason(input: GaussianMixtureInput): GaussianMixture | string {
  try {
    return gaussianMixture(input);
  } catch (error) {
    if (error instanceof KernelError && error.code === 'too-few-rows') return error.message;
    throw error;
  }
}
