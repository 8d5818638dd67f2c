import type { GradeUnit, PayAnalyte } from '#contract/deposits.ts';
import type { CellDetail, CellSummary, MixtureFit, Screen, Subset } from '#contract/screens.ts';
import type { MixtureComponent } from '#src/components/charts/mixture.ts';
import { formatFigures, formatGrade, formatShare, gradeIn } from '#src/lib/format.ts';

const LETTERS = 'ABCDEF';

/** Pay analytes are shown in their own unit, all else in ppm. */
export const unitOf = (variable: string, payAnalytes: readonly PayAnalyte[]): GradeUnit =>
  payAnalytes.find(({ analyte }) => analyte === variable)?.unit ?? 'ppm';

/** The fit that is drawn: the chosen number of populations. */
export const chosenFit = ({ mixtures, chosenK }: CellDetail): MixtureFit | null =>
  mixtures.find(({ k }) => k === chosenK) ?? null;

/** Populations on the axis of a unit: the mean of ln(value) moves with the unit. */
export function drawnComponents(fit: MixtureFit | null, unit: GradeUnit): MixtureComponent[] {
  if (!fit) return [];
  return fit.components.map(({ share, medianPpm, logSd }, i) => ({
    label: LETTERS[i] ?? String(i + 1), share, mean: Math.log(gradeIn(medianPpm, unit)), sd: logSd,
  }));
}

/** "A 35 %, median 0.13 % Cu". */
export const componentWords = (fit: MixtureFit | null, unit: GradeUnit, variable: string): string[] =>
  (fit?.components ?? []).map(
    ({ share, medianPpm }, i) => `${LETTERS[i] ?? i + 1} ${formatShare(share)}, median ${formatGrade(medianPpm, unit)} ${variable}`,
  );

/** Verdicts of one subset in the order of the variables. */
export function rowOf({ cells, variables }: Screen, subset: Subset): (CellSummary | null)[] {
  return variables.map((variable) => cells.find((cell) => cell.subsetKey === subset.key && cell.variable === variable) ?? null);
}

export const KIND_HEADINGS: Record<Subset['kind'], string> = {
  all: 'Whole', group: 'Groups', lithology: 'Logged rock', weathering: 'Weathering', domain: 'Domains', side: 'Fault sides',
};

/** Subsets in runs of one kind, in the order they came. */
export function byKind(subsets: readonly Subset[]): { kind: Subset['kind']; subsets: Subset[] }[] {
  const runs: { kind: Subset['kind']; subsets: Subset[] }[] = [];
  for (const subset of subsets) {
    const last = runs.at(-1);
    if (last?.kind === subset.kind) last.subsets.push(subset);
    else runs.push({ kind: subset.kind, subsets: [subset] });
  }
  return runs;
}

/** Figures under the picture, as terms. */
export function cellFacts(cell: CellDetail, unit: GradeUnit): { term: string; value: string }[] {
  const grade = (ppm: number | null): string => (ppm === null ? '–' : formatGrade(ppm, unit));
  return [
    { term: 'Mean', value: grade(cell.mean) },
    { term: 'Median', value: grade(cell.median) },
    { term: 'Coefficient of variation', value: cell.cv === null ? '–' : formatFigures(cell.cv, 3) },
    { term: 'Dip', value: cell.dip === null ? '–' : `${formatFigures(cell.dip, 3)}, ${cell.dipPText}` },
    { term: 'BIC gain of two populations', value: cell.deltaBic === null ? '–' : formatFigures(cell.deltaBic, 3) },
    { term: 'Below detection', value: `${cell.nBelow}` },
  ];
}
