import { sampleCorrelation } from 'simple-statistics';
import { normalScores } from '#kernels/populations/plotting-positions.ts';
import type { Adapters } from '../adapter.ts';
import { transformedValues } from '../transform.ts';

/** Points of a normal probability plot and their correlation. */
export const PROBABILITY_PLOT: Adapters = {
  normal_qq: (set, check) => {
    const sample = transformedValues(set, check).sort();
    const scores = normalScores(sample.length, sample.length > 10 ? 'hazen' : 'blom');
    const at = check.inputs.report_positions ?? sample.map((_, i) => i + 1);
    return {
      theoretical: Float64Array.from(at, (i) => scores[i - 1] ?? NaN),
      sample: Float64Array.from(at, (i) => sample[i - 1] ?? NaN),
      r: sampleCorrelation([...scores], [...sample]),
    };
  },
};
