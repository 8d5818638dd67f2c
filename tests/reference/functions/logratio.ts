import { sampleCovariance } from 'simple-statistics';
import { additiveLogRatio } from '#kernels/compositions/additive-log-ratio.ts';
import { aitchisonDistance } from '#kernels/compositions/aitchison-geometry.ts';
import { centredLogRatio } from '#kernels/compositions/centred-log-ratio.ts';
import { close } from '#kernels/compositions/closure.ts';
import { helmertBasis, pivotBasis } from '#kernels/compositions/ilr-basis.ts';
import { isometricLogRatio } from '#kernels/compositions/isometric-log-ratio.ts';
import { compositionalCentre, variation } from '#kernels/compositions/variation.ts';
import { summarise } from '#kernels/statistics/summary.ts';
import { rawTable } from '#tests/support/reference-transform.ts';
import type { ReferenceCheck, ReferenceSet } from '#tests/support/reference.ts';
import { inputNumber, type Adapter, type Adapters } from '../adapter.ts';
import { reported, rowsOfTable, transformedColumns } from '../transform.ts';
import { BELOW_DETECTION } from './below-detection.ts';

type Kernel = (parts: Float64Array, nCols: number, check: ReferenceCheck) => Float64Array;

/** Rows of a kernel's table, those the check reports. */
const table =
  (kernel: Kernel): Adapter =>
  (set, check) => {
    const { values, nRows, nCols } = rawTable(set, check);
    const made = kernel(values, nCols, check);
    return reported(check, rowsOfTable(made, made.length / nRows));
  };

const columnsAs = (set: ReferenceSet, check: ReferenceCheck, transform: string) =>
  transformedColumns(set, { ...check, inputs: { ...check.inputs, transform } });

const means =
  (transform: string): Adapter =>
  (set, check) =>
    columnsAs(set, check, transform).map((column) => summarise(column).mean);

const sds =
  (transform: string): Adapter =>
  (set, check) =>
    columnsAs(set, check, transform).map((column) => summarise(column).sd);

const covariance =
  (transform: string): Adapter =>
  (set, check) => {
    const columns = columnsAs(set, check, transform).map((column) => [...column]);
    return columns.map((a) => columns.map((b) => sampleCovariance(a, b)));
  };

const parts = (set: ReferenceSet, check: ReferenceCheck) => {
  const { values, nCols } = rawTable(set, check);
  return { values, nCols, rows: rowsOfTable(values, nCols) };
};

/** Additive log-ratio needs its denominator last, as the layout promises. */
const alr: Kernel = (values, nCols, { id, inputs }) => {
  const last = inputs.columns?.at(-1);
  if (inputs['denominator'] !== undefined && inputs['denominator'] !== last)
    throw new Error(`${id}: expected the last part ${last} as denominator`);
  return additiveLogRatio(values, nCols);
};

/** Log-ratio coordinates, their moments and the geometry of compositions. */
export const LOGRATIO: Adapters = {
  closure: table((values, nCols, check) => close(values, nCols, inputNumber(check, 'total'))),
  clr: table((parts, nCols) => centredLogRatio(parts, nCols)),
  ilr_helmert: table((values, nCols) => isometricLogRatio(values, helmertBasis(nCols))),
  ilr_pivot: table((values, nCols) => isometricLogRatio(values, pivotBasis(nCols))),
  alr: table(alr),
  clr_column_mean: means('clr'),
  clr_column_sd: sds('clr'),
  clr_covariance: covariance('clr'),
  ilr_helmert_column_mean: means('ilr_helmert'),
  ilr_helmert_column_sd: sds('ilr_helmert'),
  ilr_helmert_covariance: covariance('ilr_helmert'),
  ilr_pivot_column_mean: means('ilr_pivot'),
  ilr_pivot_column_sd: sds('ilr_pivot'),
  ilr_pivot_covariance: covariance('ilr_pivot'),
  variation_matrix: (set, check) => {
    const { values, nCols } = parts(set, check);
    return rowsOfTable(variation(values, nCols).matrix, nCols);
  },
  total_variance: (set, check) => {
    const { values, nCols } = parts(set, check);
    return variation(values, nCols).totalVariance;
  },
  centre: (set, check) => {
    const { values, nCols } = parts(set, check);
    return compositionalCentre(values, nCols);
  },
  aitchison_distance: (set, check) => {
    const { rows } = parts(set, check);
    const row = (number: number) => Float64Array.from(rows[number - 1] ?? []);
    const numbers = [check.inputs['row_pairs']].flat(2).map(Number);
    return numbers.flatMap((first, i) =>
      i % 2 === 0 ? [aitchisonDistance(row(first), row(numbers[i + 1] ?? NaN))] : [],
    );
  },
  ...BELOW_DETECTION,
};
