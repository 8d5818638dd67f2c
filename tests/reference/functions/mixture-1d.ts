import { mixtureData, spreadOf } from '#kernels/populations/mixture-data.ts';
import { fitNormalMixture, type NormalMixture } from '#kernels/populations/normal-mixture.ts';
import type { ReferenceCheck, ReferenceSet } from '#tests/support/reference.ts';
import { dataKey, inputNumber, inputText, remembered, type Adapters } from '../adapter.ts';
import { transformedValues } from '../transform.ts';

/** Random starts besides the deterministic ones; rare optima need this many. */
const RESTARTS = 100;

/** Narrower than this share of the total sd a component sits on tied values: no fit, a collapse. */
const LEAST_SD_SHARE = 0.05;

const fits = remembered<NormalMixture>();

/** The fit of k components, started also from the fit of one fewer. */
function fit(set: ReferenceSet, check: ReferenceCheck, k = inputNumber(check, 'k')): NormalMixture {
  const model = inputText(check, 'model');
  if (model !== 'V' && model !== 'E') throw new Error(`${check.id}: no model ${model}`);
  return fits(`${dataKey(set, check)} ${model} ${k}`, () => {
    const data = mixtureData(transformedValues(set, check));
    return fitNormalMixture(data, k, {
      variance: model === 'E' ? 'shared' : 'own',
      minSd: LEAST_SD_SHARE * spreadOf(data).sd,
      restarts: RESTARTS,
      seed: 1,
      smaller: k > 1 ? fit(set, check, k - 1).components : null,
    });
  });
}

/** Mixtures of normals of one column by maximum likelihood. */
export const MIXTURE_1D: Adapters = {
  normal_mixture_1d: (set, check) => {
    const { components, logLik, bic, parameters } = fit(set, check);
    return {
      loglik: logLik,
      bic,
      parameters,
      proportion: components.map(({ share }) => share),
      mean: components.map(({ mean }) => mean),
      sd: components.map(({ sd }) => sd),
    };
  },
};
