import type { DomainEvidence, OrientationSet } from '#contract/domains.ts';
import { orientationSummary, type ConfidenceClass, type OrientationClass } from '#kernels/orientation/orientation-summary.ts';
import type { ColumnStore } from '#server/db/column-store.ts';

type Structure = DomainEvidence['structures'][number];

/** All planes of a snapshot, each with the interval it lies in by hole and depth. */
export function readStructures(store: ColumnStore, tableId: number | null): Structure[] {
  if (tableId === null) return [];
  const texts = (name: string): string[] => {
    const { codes, dictionary } = store.readCategory(tableId, name);
    return Array.from(codes, (code) => dictionary[code] ?? '');
  };
  const [holes, types, confidences] = [texts('hole'), texts('structure type'), texts('confidence')];
  const [depth, dip, direction] = ['depth', 'dip', 'dip direction'].map((name) => store.readNumbers(tableId, name));
  return holes.flatMap((hole, row) => {
    const plane = dip?.[row] ?? Number.NaN;
    if (Number.isNaN(plane)) return [];
    const dipDirection = direction?.[row] ?? Number.NaN;
    return [{ hole, depthM: depth?.[row] ?? 0, structureType: types[row] ?? '', confidence: confidences[row] ?? '', dip: plane, dipDirection: Number.isNaN(dipDirection) ? null : dipDirection }];
  });
}

const SURE = ['good', 'moderate'];

/** Each stated confidence by itself, and the sure ones together where both are stated. */
function classesOf(structures: readonly Structure[]): ConfidenceClass[] {
  const found = [...new Set(structures.map(({ confidence }) => confidence))].sort();
  const single = found.map((name) => ({ name, confidences: [name] }));
  const sure = SURE.filter((name) => found.includes(name));
  return sure.length > 1 ? [{ name: sure.join(' and '), confidences: sure }, ...single] : single;
}

const rounded = (value: number, digits: number): string => value.toFixed(digits).replace('-', '−');

function readingOf({ n, meanPlane, alpha95Deg, refusals, woodcockK }: OrientationClass): string {
  if (!meanPlane || n === 0) return refusals.join(' ');
  const plane = `${rounded(meanPlane.dip, 0)} → ${meanPlane.dipDirection === null ? '–' : String(Math.round(meanPlane.dipDirection) % 360).padStart(3, '0')}`;
  const shape = woodcockK === null ? '' : woodcockK > 1 ? ', clustered' : ', a girdle';
  return [`Mean plane ${plane}${alpha95Deg === null ? '' : ` ± ${rounded(alpha95Deg, 0)}°`}${shape}.`, ...refusals].join(' ');
}

/** Orientation statistics of each structure type by confidence. */
export function orientationSets(structures: readonly Structure[]): OrientationSet[] {
  const types = [...new Set(structures.map(({ structureType }) => structureType))];
  return types.flatMap((structureType) => {
    const ofType = structures.filter((structure) => structure.structureType === structureType);
    return orientationSummary(ofType, { classes: classesOf(ofType) }).map((found): OrientationSet => ({
      structureType, confidence: found.name, n: found.n,
      meanPlane: found.meanPlane ? { dip: found.meanPlane.dip, dipDirection: found.meanPlane.dipDirection } : null,
      fisherK: finite(found.fisherKappa), alpha95: finite(found.alpha95Deg), eigenvalues: found.eigenvalues ? [...found.eigenvalues] : null,
      woodcockK: finite(found.woodcockK), strengthC: finite(found.woodcockC), uniformityP: finite(found.uniformity?.p ?? null), reading: readingOf(found),
    }));
  }).sort((a, b) => b.n - a.n);
}

const finite = (value: number | null): number | null => (value !== null && Number.isFinite(value) ? value : null);
