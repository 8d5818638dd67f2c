import { seededRandom } from '#kernels/random.ts';
import { readCv } from './coefficient-of-variation.ts';
import { dipTest, spreadTies, type DipTest } from './dip-test.ts';
import { evenOddsPoint } from './even-odds.ts';
import { summariseGrades, type GradeSummaries } from './grade-summary.ts';
import { logHistogram, type LogHistogram } from './log-histogram.ts';
import {
  choosePopulations,
  fitLognormalMixtures,
  type LognormalMixture,
} from './lognormal-mixture.ts';
import { mixingVerdict, type Verdict } from './mixing-verdict.ts';
import { mixtureData } from './mixture-data.ts';
import { probabilityPlot, type ProbabilityPlot } from './probability-plot.ts';
import { screenRows, type ScreenRows } from './screen-rows.ts';
import { fitSkewedPopulation } from './skewed-population.ts';
import { fitTruncatedPopulation } from './truncated-population.ts';
import { VERDICT_RULES } from './verdict-evidence.ts';

/** Settings of a screen. */
export interface ScreenOptions {
  /** Populations at most, default 4. */
  maxPopulations?: number;
  /** Points of the probability plot at most, default 400. */
  plotPoints?: number;
  seed?: number;
  /** Unit of the grades, said in the reasons. */
  unit?: string;
  /** Share done; may throw to cancel. */
  onProgress?: (share: number) => void;
}

/** Everything one mixing verdict stands on; grades in the unit they came in. */
export interface PopulationScreen extends Verdict {
  /** Rows used: measured, below detection and at an upper limit. */
  n: number;
  nMeasured: number;
  nBelow: number;
  nAbove: number;
  nMissing: number;
  /** Sum of the weights (m); null when unweighted. */
  metres: number | null;
  /** Effective rows, the n of BIC. */
  effectiveN: number;
  /** Null when no row has a value. */
  summaries: GradeSummaries | null;
  /** On ln grade of measured rows, ties spread; null when fewer than two. */
  dip: DipTest | null;
  /** Fits of 1 to 4 lognormal populations; empty when there was nothing to fit. */
  mixtures: LognormalMixture[];
  chosenK: number | null;
  /** Grade of even odds between the two sides of the chosen mixture. */
  evenOdds: number | null;
  plot: ProbabilityPlot | null;
  histogram: LogHistogram | null;
  notes: string[];
}

/**
 * Screens one variable in one subset for mixed populations: statistics, lognormal mixtures, dip test,
 * plot points and the mixing verdict with its reasons.
 *
 * @param values Grades > 0 of one unit, or the limit of a row below or above one; NaN = missing.
 * @param weights Interval lengths (m), or null to count rows equally.
 * @param censoring Code per row: 0 measured, 1 below the limit, 2 above it, anything else missing; null
 *   when all rows are measured.
 * @throws {KernelError} `shape`, `not-positive`, `not-finite`, `bad-parameter`, `right-censored` when more
 *   than 1 % of the rows are above an upper limit.
 * @see The methods named in the modules of this folder; thresholds in `VERDICT_RULES`.
 */
export function screenPopulation(
  values: Float64Array,
  weights: Float64Array | null = null,
  censoring: Uint8Array | null = null,
  options: ScreenOptions = {},
): PopulationScreen {
  const rows = screenRows(values, weights, censoring);
  const counts = countsOf(rows);
  if (counts.n === 0) return { ...counts, ...NOTHING, reasons: ['No row has a value.'] };
  const summaries = summariseGrades(rows);
  if (isConstant(rows.measured)) {
    const reason =
      rows.measured.length === 0
        ? 'Every row is below detection.'
        : 'All measured values are equal.';
    return { ...counts, ...NOTHING, summaries, reasons: [reason], notes: notesOf(rows) };
  }
  return {
    ...counts,
    summaries,
    ...judged(rows, counts.n, options),
    notes: notesOf(rows, summaries),
  };
}

const NOTHING = {
  verdict: 'too-few',
  deltaBic: null,
  deltaBicBestSingle: null,
  separation: null,
  effectiveN: 0,
  summaries: null,
  dip: null,
  mixtures: [],
  chosenK: null,
  evenOdds: null,
  plot: null,
  histogram: null,
  notes: [],
} as const satisfies Partial<PopulationScreen>;

function countsOf({ measured, below, weights, nBelow, nAbove, nMissing }: ScreenRows) {
  return {
    n: measured.length + below.length,
    nMeasured: measured.length - nAbove,
    nBelow,
    nAbove,
    nMissing,
    metres: weights && weights.reduce((sum, weight) => sum + weight, 0),
  };
}

const isConstant = (values: Float64Array): boolean => values.every((value) => value === values[0]);

/** Fits, tests and the verdict; measured values vary. */
function judged(
  rows: ScreenRows,
  n: number,
  { maxPopulations = 4, plotPoints = 400, seed = 1, unit, onProgress }: ScreenOptions,
) {
  const data = mixtureData(
    rows.measured.map(Math.log),
    rows.below.map(Math.log),
    rows.weights ?? undefined,
  );
  onProgress?.(0.1);
  const mixtures = fitLognormalMixtures(data, maxPopulations, seed, (share) =>
    onProgress?.(0.1 + 0.7 * share),
  );
  const chosen = choosePopulations(mixtures);
  const dip = dipTest(spreadTies(rows.measured, seededRandom(seed)).map(Math.log));
  onProgress?.(0.9);
  const skewed = fitSkewedPopulation(data);
  const truncated = rows.nBelow > 0 ? null : fitTruncatedPopulation(data);
  const verdict = mixingVerdict({
    n,
    effectiveN: data.n,
    fits: mixtures,
    chosen,
    skewed,
    truncated,
    dip,
    unit,
  });
  onProgress?.(1);
  return {
    ...verdict,
    effectiveN: data.n,
    dip,
    mixtures,
    chosenK: chosen.k,
    evenOdds: evenOddsOf(chosen, verdict),
    plot: probabilityPlot(data, plotPoints),
    histogram: logHistogram(data),
  };
}

/** Even odds between the populations on both sides of the clearest cut; null for one population. */
function evenOddsOf(chosen: LognormalMixture, { separation }: Verdict): number | null {
  const cut = separation?.lowerCount ?? 1;
  const [lower, upper] = [chosen.normal[cut - 1], chosen.normal[cut]];
  const point = lower && upper ? evenOddsPoint(lower, upper) : null;
  return point === null ? null : Math.exp(point);
}

function notesOf(
  { measured, nBelow, nAbove, nMissing, weights }: ScreenRows,
  summaries?: GradeSummaries,
): string[] {
  const used = measured.length + nBelow;
  const notes: string[] = [];
  if (nMissing > 0) notes.push(`${nMissing} rows without a value were left out.`);
  if (nBelow > 0)
    notes.push(
      `${nBelow} rows below detection (${((100 * nBelow) / used).toFixed(0)} %) enter fits as below their limit, the mean and CV at half of it, the dip not at all.`,
    );
  if (nAbove > 0) notes.push(`${nAbove} rows above an upper limit enter at the limit.`);
  if (weights)
    notes.push('Mean, median, CV, fits and plot are weighted by length; the dip counts rows.');
  const cv = (summaries?.weighted ?? summaries?.unweighted)?.cv ?? null;
  if (cv !== null)
    notes.push(
      `CV ${cv.toFixed(2)} is ${readCv(cv).text} (rule of thumb, no part of the verdict).`,
    );
  if (used >= VERDICT_RULES.minRows)
    notes.push('Rows down a hole are not independent: p values and BIC are nominal.');
  return notes;
}
