import { fitComponents, type Components } from '#kernels/components/components.ts';
import { scoreComponents } from '#kernels/components/scores.ts';
import { rawTable, toColumns } from '#tests/support/reference-transform.ts';
import type { ReferenceCheck, ReferenceSet } from '#tests/support/reference.ts';
import { inputNumber, inputText, type Adapters } from '../adapter.ts';
import { reported, rowsOfColumns, rowsOfTable } from '../transform.ts';

const BASIS = { clr_cov: 'clr-covariance', ln_cor: 'log-correlation' } as const;

function fit(set: ReferenceSet, check: ReferenceCheck) {
  const transform = inputText(check, 'transform');
  if (transform !== 'clr_cov' && transform !== 'ln_cor')
    throw new Error(`${check.id}: no components of ${transform}`);
  const columns = toColumns(rawTable(set, check));
  const fitted = fitComponents(columns, { basis: BASIS[transform] });
  return { columns, fitted, count: inputNumber(check, 'components') };
}

function loadingRows({ loadings, eigenvalues }: Components, count: number): number[][] {
  return rowsOfTable(loadings, eigenvalues.length).map((row) => row.slice(0, count));
}

/** Components of clr (covariance) and of ln (correlation). */
export const PCA: Adapters = {
  pca_eigenvalues: (set, check) => {
    const { fitted, count } = fit(set, check);
    return fitted.eigenvalues.slice(0, count);
  },
  pca_explained_ratio: (set, check) => {
    const { fitted, count } = fit(set, check);
    return fitted.shares.slice(0, count);
  },
  pca_loadings: (set, check) => {
    const { fitted, count } = fit(set, check);
    return loadingRows(fitted, count);
  },
  pca_scores: (set, check) => {
    const { columns, fitted, count } = fit(set, check);
    return reported(check, rowsOfColumns(scoreComponents(columns, fitted, count)));
  },
};
