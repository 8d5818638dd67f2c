import { compositeBreaks } from '#kernels/intervals/composite-breaks.ts';
import { compositeGrade } from '#kernels/intervals/composite-grade.ts';
import { planComposites } from '#kernels/intervals/composite-plan.ts';
import { findIntervalProblems } from '#kernels/intervals/interval-problems.ts';
import { coveredM, orderByDepth, orderWithoutOverlap } from '#kernels/intervals/interval-table.ts';
import { mergeIntervals } from '#kernels/intervals/merge-intervals.ts';
import { transferCategory } from '#kernels/intervals/transfer-category.ts';
import { halves, metresOf, testHostileInputs } from '#tests/support/hostile-inputs.ts';

/** Intervals from given tops, a millimetre long, in order. */
const thin = (fromM: Float64Array) => {
  const tops = fromM.toSorted();
  return { fromM: tops, toM: tops.map((top) => top + 0.001) };
};
const byHole = (n: Float64Array) => ({ holeStarts: halves(n), ...metresOf(n) });
const inOne = (column: Float64Array) => new Int32Array(column.length);

testHostileInputs([
  [
    'compositeBreaks',
    (ends) => Array.from(ends, (end) => compositeBreaks(0, end, { lengthM: 2, mode: 'fixed' })),
  ],
  [
    'compositeBreaks, length',
    (v) => Array.from(v, (lengthM) => compositeBreaks(0, 9, { lengthM })),
  ],
  [
    'compositeGrade',
    (valuesPpm, densityTPerM3) =>
      compositeGrade(
        planComposites(byHole(valuesPpm), inOne(valuesPpm), { lengthM: 2 }),
        { valuesPpm },
        { densityTPerM3 },
      ),
    'missing',
  ],
  [
    'planComposites',
    (fromM) =>
      planComposites({ holeStarts: Int32Array.of(0, fromM.length), ...thin(fromM) }, inOne(fromM), {
        lengthM: 2,
      }),
  ],
  ['orderByDepth', (fromM) => orderByDepth(thin(fromM))],
  ['orderWithoutOverlap', (fromM) => orderWithoutOverlap(thin(fromM), 0.005)],
  ['coveredM', (fromM) => coveredM(thin(fromM))],
  ['mergeIntervals', (a, b) => mergeIntervals(thin(a), thin(b))],
  [
    'transferCategory',
    (samples, logs) => transferCategory(thin(samples), { ...thin(logs), code: inOne(logs) }),
  ],
]);

testHostileInputs([
  ['findIntervalProblems', (fromM) => findIntervalProblems(thin(fromM)).map(({ row }) => row)],
]);
