import { gaussianMixture, type GaussianMixture } from '#kernels/clustering/gaussian-mixture.ts';
import type { CovarianceFamily } from '#kernels/clustering/mixture-model.ts';
import type { ReferenceCheck, ReferenceSet } from '#tests/support/reference.ts';
import { dataKey, inputNumber, inputText, remembered, type Adapters } from '../adapter.ts';
import { transformedColumns } from '../transform.ts';

const FAMILY_OF: ReadonlyMap<string, CovarianceFamily> = new Map([
  ['VVV', 'full'],
  ['VVI', 'diagonal'],
  ['VII', 'spherical'],
  ['EEE', 'tied'],
]);

/** Starts enough for the best optimum known of tables of this size. */
const STARTS = 16;

const fits = remembered<GaussianMixture>();

function fit(set: ReferenceSet, check: ReferenceCheck): GaussianMixture {
  const [model, k] = [inputText(check, 'model'), inputNumber(check, 'k')];
  const family = FAMILY_OF.get(model);
  if (!family) throw new Error(`${check.id}: no model ${model}`);
  return fits(`${dataKey(set, check)} ${model} ${k}`, () =>
    gaussianMixture({
      columns: transformedColumns(set, check),
      k,
      family,
      seed: 1,
      starts: STARTS,
      rowsPerParameter: 0, // small published tables are fitted as they were
    }),
  );
}

/** Mixtures of normals in several dimensions. */
export const GMM: Adapters = {
  gmm_loglik: (set, check) => fit(set, check).logLik,
  gmm_bic: (set, check) => fit(set, check).bic,
  gmm_parameter_count: (set, check) => fit(set, check).parameters,
};
