import { association } from '#kernels/tables/association.ts';
import { categoryFrom } from '#kernels/tables/category.ts';
import { chiSquareTest } from '#kernels/tables/chi-square.ts';
import { crossTabulate } from '#kernels/tables/cross-tabulation.ts';
import { chiSquareTail } from '#kernels/tables/special-functions.ts';
import {
  labelsBesideTexts,
  textsOf,
  type ReferenceCheck,
  type ReferenceSet,
} from '#tests/support/reference.ts';
import { inputText, type Adapters } from '../adapter.ts';
import { rowsOfTable } from '../transform.ts';

/** Two label columns: both of the data, or given labels against one of the data. */
function labelColumns(set: ReferenceSet, check: ReferenceCheck): [string[], string[]] {
  const colColumn = inputText(check, 'col_column');
  if (check.inputs.labels_from !== undefined) {
    const { labels, texts } = labelsBesideTexts(set, check, colColumn);
    return [labels.map(String), texts];
  }
  return [textsOf(set, check, inputText(check, 'row_column')), textsOf(set, check, colColumn)];
}

/** Counts, chi-square, residuals and strength of two label columns. */
export const CROSSTAB: Adapters = {
  crosstab: (set, check) => {
    const [rows, cols] = labelColumns(set, check);
    const each = new Float64Array(rows.length).fill(1);
    const { counts, colLevels } = crossTabulate(categoryFrom(rows), categoryFrom(cols), each);
    const nCols = colLevels.length;
    const [test, strength] = [chiSquareTest(counts, nCols), association(counts, nCols)];
    if (!test || !strength) throw new Error(`${check.id}: one row or column only`);
    return {
      counts: rowsOfTable(counts, nCols),
      expected: rowsOfTable(test.expected, nCols),
      chi2: test.chiSquare,
      df: test.df,
      p: chiSquareTail(test.chiSquare, test.df), // the kernel withholds p when counts are small
      cramers_v: strength.cramersV,
      cramers_v_bias_corrected: strength.cramersVCorrected,
      pearson_residual: rowsOfTable(test.pearsonResiduals, nCols),
      adjusted_residual: rowsOfTable(test.adjustedResiduals, nCols),
    };
  },
};
