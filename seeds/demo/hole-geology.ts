import { settingAt } from './geology-model.ts';
import type { Setting } from './geology-model.ts';
import type { Hole } from './holes.ts';

/** A length of hole in which some reading of the ground does not change. */
export interface Run<Label> {
  fromM: number;
  toM: number;
  label: Label;
}

export const STEP_M = 0.1;

/** Ground is read at every fifth step, and at each step only where it changes between two of them. */
const STRIDE = 5;

/** The ground met by one hole, one setting per 10 cm step. */
export interface HoleGeology {
  hole: Hole;
  settings: Setting[];
}

/** Settings with equal keys are one portion of a sample: one rock, side and weathering. */
export const portionKey = ({ unit, block, weathering }: Setting): string =>
  `${unit}|${block}|${weathering}`;

export function readGeology(hole: Hole): HoleGeology {
  const steps = Math.round(hole.lengthM / STEP_M);
  const read = (step: number): Setting => settingAt(hole.path.positionAt((step + 0.5) * STEP_M));
  const settings: Setting[] = [];
  let here = read(0);
  for (let step = 0; step < steps; step += STRIDE) {
    const ahead = read(step + STRIDE);
    const same = portionKey(here) === portionKey(ahead);
    settings.push(here);
    for (let i = 1; i < STRIDE && step + i < steps; i++)
      settings.push(same ? here : read(step + i));
    here = ahead;
  }
  return { hole, settings };
}

/** Runs of equal labels between two steps (whole hole by default). */
export function runsOf<Label>(
  geology: HoleGeology,
  labelOf: (setting: Setting) => Label,
  firstStep = 0,
  endStep = geology.settings.length,
): Run<Label>[] {
  const runs: Run<Label>[] = [];
  for (let i = firstStep; i < endStep; i++) {
    const setting = geology.settings[i];
    if (!setting) break;
    const label = labelOf(setting);
    const last = runs.at(-1);
    if (last?.label === label) last.toM = (i + 1) * STEP_M;
    else runs.push({ fromM: i * STEP_M, toM: (i + 1) * STEP_M, label });
  }
  return runs;
}
