import { describe, expect, it } from 'vitest';
import { combine, cross, dot, toDegrees } from '#kernels/geometry/directions.ts';
import { lineVector, planeNormal, planeOf } from '#kernels/geometry/planes.ts';
import { orientationDifference } from '#kernels/orientation/orientation-difference.ts';
import {
  orientationSummary,
  polesOf,
  type MeasuredPlane,
} from '#kernels/orientation/orientation-summary.ts';
import { seededRandom } from '#kernels/random.ts';

const classes = [
  { name: 'good', confidences: ['good'] },
  { name: 'good and moderate', confidences: ['good', 'moderate'] },
  { name: 'poor', confidences: ['poor'] },
];

/** Planes about 60 to 090, scattered by a few degrees. */
function cluster(n: number, confidence: string, seed = 1): MeasuredPlane[] {
  const random = seededRandom(seed);
  return Array.from({ length: n }, () => ({
    dip: 60 + 4 * random.normal(),
    dipDirection: 90 + 4 * random.normal(),
    confidence,
  }));
}

const onlyClass = (planes: MeasuredPlane[]) => {
  const [summary] = orientationSummary(planes, {
    classes: [{ name: 'all', confidences: ['good'] }],
  });
  if (!summary) throw new Error('expected a class');
  return summary;
};

describe('by confidence class', () => {
  it('summarises each class and says what an empty one lacks', () => {
    const planes = [...cluster(12, 'good'), ...cluster(8, 'moderate', 2)];
    const [good, both, poor] = orientationSummary(planes, { classes });
    expect([good?.n, both?.n, poor?.n]).toEqual([12, 20, 0]);
    expect(good?.meanPlane?.dip).toBeGreaterThan(57);
    expect(good?.meanPlane?.dip).toBeLessThan(63);
    expect(good).toMatchObject({ isFitForThickness: true, refusals: [] });
    expect(good?.uniformity?.p).toBeLessThan(1e-6);
    expect(both?.eigenvalues?.[0]).toBeGreaterThan(0.98);
    expect(poor).toMatchObject({ meanPlane: null, refusals: ['No planes of this class.'] });
  });

  it('withholds tests and thickness below ten planes', () => {
    const few = onlyClass(cluster(9, 'good'));
    expect(few).toMatchObject({ uniformity: null, isFitForThickness: false });
    expect(few.refusals).toEqual(['No test: 9 planes, 10 needed; true thickness is withheld.']);
    expect(few.alpha95Deg).not.toBeNull();
  });

  it('counts effective planes when they are weighted', () => {
    const weighted = onlyClass(
      cluster(12, 'good').map((plane, i) => ({ ...plane, weight: i < 2 ? 3.864 : 1 })),
    );
    expect(weighted.nEffective).toBeCloseTo((2 * 3.864 + 10) ** 2 / (2 * 3.864 ** 2 + 10), 10);
    expect(weighted.uniformity).toBeNull();
    expect(weighted.refusals[0]).toBe(
      'No test: 12 (effective 7.9) planes, 10 needed; true thickness is withheld.',
    );
  });

  it('reads the fold axis of a girdle: planes that all hold the line 20 to 040', () => {
    const axis = lineVector({ trend: 40, plunge: 20 });
    const level = lineVector({ trend: 130, plunge: 0 });
    const third = cross(axis, level);
    const planes = Array.from({ length: 24 }, (_, i) => {
      const turn = (i * Math.PI) / 24;
      const normal = combine(Math.cos(turn), level, Math.sin(turn), third);
      return { ...planeOf(normal), confidence: 'good' };
    });
    const fold = onlyClass(planes);
    expect(fold.girdleAxis?.trend).toBeCloseTo(40, 6);
    expect(fold.girdleAxis?.plunge).toBeCloseTo(20, 6);
    expect(fold.isFitForThickness).toBe(false);
    expect(fold.refusals.join(' ')).toContain('The poles form no cluster');
  });

  it('takes steep planes dipping both ways as one set', () => {
    const steep = Array.from({ length: 12 }, (_, i) => ({
      dip: 88,
      dipDirection: i % 2 ? 90 : 270,
      confidence: 'good',
    }));
    const summary = onlyClass(steep);
    expect(summary.meanPlane?.dip).toBeCloseTo(90, 6);
    expect(summary.meanPlane?.dipDirection).toBeCloseTo(90, 6);
    expect(summary.fisherKappa).toBeGreaterThan(500);
  });

  it('takes a single plane, equal planes and horizontal ones', () => {
    const flat: MeasuredPlane = { dip: 0, dipDirection: null, confidence: 'good' };
    const one = onlyClass([flat]);
    expect(one).toMatchObject({
      n: 1,
      meanPlane: { dip: 0, dipDirection: null },
      woodcockC: null,
      alpha95Deg: null,
    });
    const equal = onlyClass(Array.from({ length: 12 }, () => flat));
    expect(equal).toMatchObject({
      fisherKappa: null,
      alpha95Deg: 0,
      woodcockK: null,
      isFitForThickness: true,
    });
  });

  it('refuses angles and weights out of range', () => {
    expect(() => onlyClass([{ dip: 95, dipDirection: 0, confidence: 'good' }])).toThrow('found 95');
    expect(() => onlyClass([{ dip: 5, dipDirection: 0, confidence: 'good', weight: 0 }])).toThrow(
      'expected a weight > 0, found 0 at plane 0',
    );
  });
});

describe('difference of two sets', () => {
  /** Six holes a side with five planes each, the second side turned in dip direction. */
  function sides(turn: number, holesPerSide = 6) {
    const random = seededRandom(3);
    const rows = Array.from({ length: 2 * holesPerSide * 5 }, (_, i) => {
      const hole = Math.floor(i / 5);
      const second = hole >= holesPerSide;
      return {
        hole,
        second,
        dip: 60 + 3 * random.normal(),
        dipDirection: 90 + (second ? turn : 0) + 3 * random.normal(),
      };
    });
    const holes = Int32Array.from(rows, ({ hole }) => hole);
    return [polesOf(rows), holes, Uint8Array.from(rows, ({ second }) => Number(second))] as const;
  }

  it('finds a turn of 40 degrees and none of 0', () => {
    const shares: number[] = [];
    const turned = orientationDifference(...sides(40), {
      seed: 1,
      draws: 199,
      onProgress: (s) => shares.push(s),
    });
    const between = toDegrees(Math.acos(dot(planeNormal(60, 90), planeNormal(60, 130))));
    expect(Math.abs(turned.angleDeg - between)).toBeLessThan(2);
    expect(turned).toMatchObject({ holes: [6, 6], refusal: null });
    expect(turned.p).toBeLessThan(0.02);
    expect(shares).toHaveLength(199);
    expect(orientationDifference(...sides(0), { seed: 1, draws: 199 }).p).toBeGreaterThan(0.05);
  });

  it('gives no p with fewer than four holes a side, and refuses bad shapes', () => {
    const few = orientationDifference(...sides(40, 3), { seed: 1 });
    expect(few).toMatchObject({ p: null, refusal: 'No p: 3 and 3 holes, 4 needed on each side.' });
    const [poles, holes] = sides(0);
    expect(() => orientationDifference(poles, holes, new Uint8Array(1), { seed: 1 })).toThrow(
      'expected 60 holes',
    );
    expect(() => orientationDifference(poles, holes, new Uint8Array(60), { seed: 1 })).toThrow(
      'found none',
    );
    expect(() => orientationDifference(...sides(0), { seed: 1, draws: 0 })).toThrow('draws >= 1');
  });
});
