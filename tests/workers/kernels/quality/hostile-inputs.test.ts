import { blankLimit, readBlanks } from '#kernels/quality/blanks.ts';
import { bootstrapInterval } from '#kernels/quality/bootstrap.ts';
import { densityCoverage, densityLine } from '#kernels/quality/density-coverage.ts';
import { drift } from '#kernels/quality/drift.ts';
import {
  duplicatePrecision,
  halfRelativeDifference,
} from '#kernels/quality/duplicate-precision.ts';
import { compareMethods } from '#kernels/quality/method-comparison.ts';
import { usablePairs } from '#kernels/quality/pairs.ts';
import { passingBablok } from '#kernels/quality/passing-bablok.ts';
import { compareQuantiles } from '#kernels/quality/quantile-comparison.ts';
import { recoveryAgainstGrade, spearmanTest } from '#kernels/quality/recovery.ts';
import { reducedMajorAxis } from '#kernels/quality/reduced-major-axis.ts';
import {
  controlRules,
  materialBias,
  swapCandidates,
  withSiteSd,
} from '#kernels/quality/reference-material.ts';
import { logitOfRatio, solubleRatio } from '#kernels/quality/soluble-ratio.ts';
import {
  binomialTail,
  precisionAt,
  precisionControl,
  thompsonHowarth,
} from '#kernels/quality/thompson-howarth.ts';
import { valuesOnIntervals } from '#kernels/quality/values-on-intervals.ts';
import { halves, testHostileInputs } from '#tests/support/hostile-inputs.ts';

const seed = 1;
const certificate = { name: 'A', value: 3, sd: 0.5 };
const metres = (n: number, lengthM: number) => ({
  from: Float64Array.from({ length: n }, (_, i) => i * lengthM),
  to: Float64Array.from({ length: n }, (_, i) => (i + 1) * lengthM),
});
/** A column three times over: enough pairs for a line. */
const thrice = (column: Float64Array) => Float64Array.of(...column, ...column, ...column);

testHostileInputs([
  ['blankLimit', (values) => Array.from(values, (value) => blankLimit(value, 100))],
  ['readBlanks', (blanks, before) => readBlanks(blanks, before, 3), 'missing'],
  ['densityCoverage', (lengths, density) => densityCoverage(lengths, density)],
  ['densityLine', (grade, density) => densityLine(grade, density)],
  ['drift', (z) => drift(z, { seed, draws: 19 }), 'missing'],
  ['duplicatePrecision', (a, b) => duplicatePrecision(a, b, { seed })],
  ['compareMethods', (other, reference) => compareMethods(other, reference, { seed })],
  ['passingBablok', (x, y) => passingBablok(x, y, { seed })],
  ['compareQuantiles', (first, second) => compareQuantiles(first, second, { seed })],
  [
    'recoveryAgainstGrade',
    (recovery, grade) =>
      recoveryAgainstGrade(
        recovery.map((value) => 15 * value),
        grade,
        halves(grade),
        { seed, draws: 19 },
      ),
  ],
  ['spearmanTest', (x, y) => spearmanTest(x, y)],
  ['reducedMajorAxis', (x, y) => reducedMajorAxis(x, y)],
  ['controlRules', (results) => controlRules(results, certificate), 'missing'],
  ['materialBias', (results) => materialBias(results, 3)],
  ['withSiteSd', (results) => withSiteSd(certificate, results)],
  ['swapCandidates', (results) => swapCandidates(results[0] ?? NaN, [certificate])],
  ['solubleRatio', (total, soluble) => solubleRatio(total, soluble, { limit: 0.01 }), 'missing'],
  ['logitOfRatio', (ratio) => logitOfRatio(ratio.map((value) => value / 6)), 'missing'],
  ['thompsonHowarth', (a, b) => thompsonHowarth(thrice(a), thrice(b))],
  ['precisionControl', (a, b) => precisionControl(a, b, { s0: 0.1, k: 0.05 })],
  [
    'valuesOnIntervals',
    (values) => valuesOnIntervals(metres(values.length, 2), values, metres(values.length, 1)),
    'missing',
  ],
  [
    'valuesOnIntervals, depths',
    (from) =>
      valuesOnIntervals(
        { from: from.toSorted(), to: from.toSorted().map((x) => x + 0.001) },
        from.toSorted(),
        metres(from.length, 1),
      ),
    'missing',
  ],
  [
    'bootstrapInterval',
    (values) => bootstrapInterval(values.length, (rows) => values[rows[0]!]!, { seed, draws: 19 }),
  ],
  [
    'bootstrapInterval, rows',
    (v) => Array.from(v, (n) => bootstrapInterval(n, () => 1, { seed, draws: 19 })),
  ],
  [
    'halfRelativeDifference',
    (a, b) => Array.from(a, (value, i) => halfRelativeDifference(value, b[i]!)),
  ],
  ['usablePairs', (a, b) => usablePairs(a, b)],
  ['binomialTail', (v) => Array.from(v, (p) => binomialTail(9, 4, p / 7))],
  ['precisionAt', (v) => Array.from(v, (x) => precisionAt({ s0: 0.1, k: 0.05 }, x))],
]);
