import type { ComponentRun } from '#contract/components.ts';
import type { Group, Grouping, Sweep } from '#contract/groupings.ts';
import type { HoleDetail } from '#contract/holes.ts';
import type { Role } from '#contract/roles.ts';
import type { AnalyteSummary, Snapshot } from '#contract/snapshots.ts';
import { makeFrame } from '#src/lib/frame.ts';
import type { Answers } from '#tests/support/render-page.tsx';

/** Two invented holes of four intervals, two metres each, and one surface sample; two groups. */
const PERSON = { id: 1, name: 'R. Okonjo' };
const WHEN = '2026-11-30T16:20:00Z';
const HOLE_CODES = [0, 0, 0, 0, 1, 1, 1, 1, NaN];
const DICTIONARY = ['TFD-001', 'TFD-002'];
const FROM = [0, 2, 4, 6, 0, 2, 4, 6, NaN];
const TO = [2, 4, 6, 8, 2, 4, 6, 8, NaN];
const WEIGHT = [2, 2, 2, 2, 2, 2, 2, 2, 1];
const LABEL = [1, 1, 2, 2, 1, 1, 1, NaN, NaN];
const MEMBERSHIP = [0.9, 0.9, 0.8, 0.5, 1, 1, 1, NaN, NaN];
const COPPER_PPM = [100, 200, 10_000, 20_000, 100, 100, 100, NaN, NaN];
const FRAME_TABLE = 11;

export const frame = makeFrame(FRAME_TABLE, {
  codes: Float64Array.from(HOLE_CODES), dictionary: DICTIONARY, fromM: Float64Array.from(FROM), toM: Float64Array.from(TO), weight: Float64Array.from(WEIGHT),
});
export const columns = { label: Float64Array.from(LABEL), membership: Float64Array.from(MEMBERSHIP) };

export const deposit = (myRole: Role) => ({
  id: 1, name: 'Tarnfell', description: '', grid: { kind: 'local', name: 'local grid' }, payAnalytes: [{ analyte: 'Cu', unit: '%' }], deleteriousAnalytes: [],
  isDemo: false, version: 1, createdAt: WHEN, myRole, leads: [PERSON],
});

export const analyte = (name: string, over: Partial<AnalyteSummary> = {}): AnalyteSummary => ({
  analyte: name, method: null, originalUnit: 'ppm', n: 8, missingShare: 0, belowShare: 0, aboveShare: 0, limitsPpm: [], medianPpm: 100, maxPpm: 1000,
  decision: 'keep', reason: 'measured above its limit in every row', caution: null, supports: ['drill'], onSurface: null, ...over,
});

export const snapshot: Snapshot = {
  id: 's1', number: 2, createdAt: WHEN, isCurrent: true, frameTableId: FRAME_TABLE, assayTableId: 5, surfaceTableId: 10, structureTableId: 12, revisions: [], rows: 9, surfaceRows: 1, holes: 2,
  metresDrilled: 16, metresAssayed: 14, metresLogged: 16, analytes: [analyte('Cu', { supports: ['drill', 'surface'] }), analyte('Na'), analyte('Zn')],
  lithologies: [{ code: 'AND', metres: 12, intervals: 6 }], weatherings: [], faults: [], structures: 0, notes: [],
};

export const run: ComponentRun = {
  id: 3, suiteId: 1, suiteName: 'Whole rock', snapshotId: 's1', snapshotNumber: 2, frameTableId: FRAME_TABLE, tableId: 13, isStale: false, parts: ['Cu', 'Na', 'Zn'], support: 'drill',
  nFit: 7, nScoredOnly: 0, nLeftOut: 1, replacedShare: 0, replacementFraction: 0.65, eigenvalues: [3, 1], shares: [0.75, 0.25],
  loadings: [[0.6, 0.4], [-0.8, 0.4], [0.2, -0.8]], brokenStick: [0.75, 0.25], parallel95: [0.6, 0.4], suggested: 1, suggestion: 'Parallel analysis keeps 1.',
  readings: [{ component: 1, positive: ['Cu'], negative: ['Na'], sentence: 'Cu against Na' }, { component: 2, positive: ['Cu', 'Na'], negative: ['Zn'], sentence: 'Cu and Na against Zn' }],
  stored: 2, notes: ['1 row misses an analyte of the suite: it has no scores.'], seed: 1, createdBy: PERSON, createdAt: WHEN,
};

export const group = (label: number, name: string, over: Partial<Group> = {}): Group => ({
  label, name, slot: label, intervals: 5, metres: 10, meanMembership: 0.95, contiguity: { runs: 2, expectedRuns: 4, kappa: 0.5, meanRunM: 5 },
  lithology: [{ code: 'AND', metres: 9, share: 0.9 }, { code: null, metres: 1, share: 0.1 }], version: 1, ...over,
});

export const grouping: Grouping = {
  id: 4, name: 'Two groups', componentRunId: 3, suiteId: 1, snapshotId: 's1', snapshotNumber: 2, frameTableId: FRAME_TABLE, componentTableId: 13, tableId: 14, isStale: false, isActive: true, support: 'drill',
  k: 2, components: 1, seed: 1, n: 7, inertia: 1, silhouette: 0.7, silhouetteRows: 7, calinskiHarabasz: 40, groups: [group(1, 'Andesite'), group(2, 'Stringer', { intervals: 2, metres: 4 })],
  fingerprints: { parts: ['Cu', 'Na', 'Zn'], values: [[-0.1, 0.2, -0.1], [1.5, -1, -0.5]] }, createdBy: PERSON, createdAt: WHEN,
};

export const sweep: Sweep = {
  id: 1, componentRunId: 3, components: 1, kFrom: 2, kTo: 3, silhouetteRows: 7, suggestedK: 3, suggestion: '3 groups have the highest mean silhouette.', seed: 1, isStale: false, createdAt: WHEN,
  rows: [{ k: 2, inertia: 2, silhouette: 0.6, calinskiHarabasz: 30, daviesBouldin: 0.5 }, { k: 3, inertia: 1, silhouette: 0.7, calinskiHarabasz: 40, daviesBouldin: 0.4 }],
};

export const hole: HoleDetail = {
  hole: 'TFD-001', x: 0, y: 0, z: 100, lengthM: 10, assayedM: 8, intervals: 4, firstRow: 0, campaign: null, trace: [[0, 0, 100], [0, 0, 90]], stations: [],
  lithology: [{ fromM: 0, toM: 10, code: 'AND' }], weathering: [], notes: [], analytes: ['Cu', 'Na', 'Zn'],
  structures: [{ depthM: 3, type: 'vein', confidence: 'good', alpha: 40, beta: 10, dip: 50, dipDirection: 90 }, { depthM: 5, type: 'vein', confidence: 'poor', alpha: null, beta: null, dip: null, dipDirection: null }],
  assays: [0, 1, 2, 3].map((row) => ({ row, fromM: row * 2, toM: row * 2 + 2, sample: `S${row}`, ppm: [COPPER_PPM[row] ?? null, 10, 10], marks: [row === 0 ? 4 : 0, 0, 0] })),
};

const numbers = (values: readonly number[]) => () => new Response(Float64Array.from(values).buffer, { headers: { 'X-Dtype': 'float64', 'X-Length': String(values.length) } });
const category = (name: string, dictionary: readonly string[]) => ({ name, kind: 'category', unit: null, dictionary, meta: null });

/** What a server with the deposit above answers. */
export function analysisAnswers(myRole: Role = 'geologist'): Answers {
  const column = (table: number, name: string) => `GET /deposits/1/tables/${table}/columns/${encodeURIComponent(name)}`;
  const row = ({ hole: name, x, y, z, lengthM, assayedM, intervals, firstRow, campaign, trace }: HoleDetail) => ({ hole: name, x, y, z, lengthM, assayedM, intervals, firstRow, campaign, trace });
  const second: HoleDetail = { ...hole, hole: 'TFD-002', y: 50, firstRow: 4, trace: [[0, 50, 100], [0, 50, 90]], assays: [] };
  return {
    'GET /deposits/1': deposit(myRole),
    'GET /deposits/1/snapshot': { snapshot, assembling: false },
    'GET /deposits/1/jobs': [],
    'GET /deposits/1/suites': [],
    'GET /deposits/1/component-runs': [run],
    'GET /deposits/1/sweeps': [sweep],
    'GET /deposits/1/groupings': [grouping],
    'GET /deposits/1/domains': { groupingId: 4, domains: [], unassigned: { intervals: 0, metres: 0 }, total: { intervals: 8, metres: 16 }, isStale: false },
    'GET /deposits/1/holes': { snapshotId: 's1', holes: [row(hole), row(second)], faults: [] },
    'GET /deposits/1/holes/TFD-001': hole,
    'GET /deposits/1/holes/TFD-002': second,
    [`GET /deposits/1/tables/${FRAME_TABLE}`]: { id: FRAME_TABLE, nRows: 9, purpose: 'frame', columns: [category('hole', DICTIONARY), category('lithology', ['AND'])] },
    [column(FRAME_TABLE, 'hole')]: numbers(HOLE_CODES),
    [column(FRAME_TABLE, 'from')]: numbers(FROM),
    [column(FRAME_TABLE, 'to')]: numbers(TO),
    [column(FRAME_TABLE, 'length')]: numbers(WEIGHT),
    [column(13, 'PC1')]: numbers([-2, -2, 3, 3, -2, -2, -2, NaN, NaN]),
    [column(13, 'PC2')]: numbers([0, 1, 0, 1, 0, 1, 0, NaN, NaN]),
    [column(14, 'group')]: numbers(LABEL),
    [column(14, 'membership')]: numbers(MEMBERSHIP),
    [column(5, 'Cu')]: numbers(COPPER_PPM),
  };
}
