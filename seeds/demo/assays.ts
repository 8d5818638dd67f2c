import { seededRandom } from '#kernels/random.ts';
import { ALL_ANALYTES, noGrades } from './analytes.ts';
import type { Grades } from './analytes.ts';
import { compositionOf } from './geochemistry.ts';
import type { HoleNoise } from './geochemistry.ts';
import type { Setting } from './geology-model.ts';
import { truthOf } from './ground-truth.ts';
import type { TruthRow } from './ground-truth.ts';
import { STEP_M, portionKey, runsOf } from './hole-geology.ts';
import type { HoleGeology } from './hole-geology.ts';
import { noiseFrom, roundTo, wanderFrom } from './noise.ts';
import type { Mineral } from './minerals.ts';
import { sampleHole } from './sampling.ts';
import type { SampleSpan } from './sampling.ts';

/** One row of an assay table before the laboratory sees it. */
export interface AssayInterval {
  hole: string;
  fromM: number;
  toM: number;
  sampleId: string;
  /** True grades in ppm; null where nothing was sampled. */
  grades: Grades | null;
  truth: TruthRow;
}

/** Correlation of the rock from one sample to the next. */
const DOWN_HOLE_CORRELATION = 0.55;
const HOLE_SHIFT_SIGMA = 0.18;

function holeNoise(seed: number): HoleNoise {
  const noise = noiseFrom(seededRandom(seed));
  const shifts = new Map<Mineral, number>();
  const holeShift = (mineral: Mineral): number => {
    const shift = shifts.get(mineral) ?? HOLE_SHIFT_SIGMA * noise.normal();
    shifts.set(mineral, shift);
    return shift;
  };
  return { noise, wander: wanderFrom(noise, DOWN_HOLE_CORRELATION), holeShift };
}

/** The setting at the middle of the longest portion, and the length-weighted mean of all portions. */
function assaySpan(
  geology: HoleGeology,
  span: SampleSpan,
  from: HoleNoise,
): { main: Setting; grades: Grades } {
  const grades = noGrades();
  const length = (span.endStep - span.fromStep) * STEP_M;
  let main: Setting | null = null;
  let longest = 0;
  for (const run of runsOf(geology, portionKey, span.fromStep, span.endStep)) {
    const middle = geology.settings[Math.floor((run.fromM + run.toM) / 2 / STEP_M)];
    if (!middle) continue;
    const portion = compositionOf(middle, from);
    const share = (run.toM - run.fromM) / length;
    for (const analyte of ALL_ANALYTES) grades[analyte] += share * portion[analyte];
    if (share > longest + 1e-9) [main, longest] = [middle, share];
  }
  if (!main)
    throw new RangeError(
      `expected ground under sample steps ${span.fromStep}–${span.endStep}, found none`,
    );
  return { main, grades };
}

/** Every row of one hole, from the top down. */
export function assayHole(geology: HoleGeology, seed: number): AssayInterval[] {
  const from = holeNoise(seed);
  return sampleHole(geology, from.noise).map((span, i) => {
    from.wander.step();
    const { main, grades } = assaySpan(geology, span, from);
    const fromM = roundTo(span.fromStep * STEP_M, 1);
    const toM = roundTo(span.endStep * STEP_M, 1);
    return {
      hole: geology.hole.id,
      fromM,
      toM,
      sampleId: `${geology.hole.id.replace('VAR-', 'S')}-${String(i + 1).padStart(3, '0')}`,
      grades: span.sampled ? grades : null,
      truth: truthOf(geology.hole.id, fromM, toM, main),
    };
  });
}
