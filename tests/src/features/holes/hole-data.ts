import type { HoleDetail, HoleRow } from '#contract/holes.ts';

export const holeRow = (change: Partial<HoleRow> = {}): HoleRow => ({
  hole: 'TFD-001', x: 100, y: 200, z: 50, lengthM: 30, assayedM: 24, intervals: 3, firstRow: 0, campaign: '1', trace: [[100, 200, 50], [100, 200, 20]], ...change,
});

export const HOLE: HoleDetail = {
  ...holeRow(),
  stations: [{ depthM: 0, azimuth: 90, dip: -60, x: 100, y: 200, z: 50 }],
  lithology: [{ fromM: 0, toM: 10, code: 'COV' }, { fromM: 10, toM: 30, code: 'AND' }],
  weathering: [{ fromM: 0, toM: 8, code: 'OX' }, { fromM: 8, toM: 12, code: 'TR' }, { fromM: 12, toM: 30, code: 'FR' }],
  structures: [
    { depthM: 12, type: 'fault', confidence: 'good', alpha: 40, beta: 120, dip: 61, dipDirection: 88 },
    { depthM: 15, type: 'vein', confidence: 'poor', alpha: null, beta: null, dip: null, dipDirection: null },
  ],
  analytes: ['As', 'Cu'],
  assays: [
    { row: 0, fromM: 0, toM: 10, sample: 'A1', ppm: [null, null], marks: [3, 4] },
    { row: 1, fromM: 10, toM: 20, sample: 'A2', ppm: [2, 10_000], marks: [1, 2] },
    { row: 2, fromM: 20, toM: 30, sample: 'A3', ppm: [61, 5300], marks: [0, 0] },
  ],
  notes: ['the last station is at 0 m: extended straight to 30 m'],
};
