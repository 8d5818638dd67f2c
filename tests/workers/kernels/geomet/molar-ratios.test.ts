import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ALKALI_TRIANGLES, alkaliPosition } from '#kernels/geomet/alkali-position.ts';
import { ALKALI_NODES, molarRatios, nodeOf } from '#kernels/geomet/molar-ratios.ts';

describe('nodes of the alkali-alumina diagram', () => {
  // Identities of the formulas.
  it.each([
    ['K-feldspar', 0, 1],
    ['albite', 1, 0],
    ['muscovite', 0, 1 / 3],
    ['paragonite', 1 / 3, 0],
    ['phlogopite', 0, 1],
    ['annite', 0, 1],
    ['anorthite', 0, 0],
    ['kaolinite', 0, 0],
    ['pyrophyllite', 0, 0],
    ['clinochlore', 0, 0],
    ['alunite', 0, 1 / 3],
  ] as const)('%s at %d, %d', (mineral, naOverAl, kOverAl) => {
    expect(nodeOf(mineral)).toEqual({ naOverAl, kOverAl });
  });

  it('has a node for every mineral shown and none without aluminium', () => {
    ALKALI_NODES.forEach((mineral) => expect(nodeOf(mineral).kOverAl).toBeGreaterThanOrEqual(0));
    expect(() => nodeOf('pyrite')).toThrow(/with aluminium, found pyrite/);
  });
});

describe('molar ratios', () => {
  it('K 2.6 Na 1.4 Al 7.8 %: K/Al .230032, Na/Al .210652, sum .440684 (computed)', () => {
    const ratios = molarRatios({ Al: 7.8, K: 2.6, Na: 1.4 });
    expect(ratios?.kOverAl).toBeCloseTo(0.230032, 6);
    expect(ratios?.naOverAl).toBeCloseTo(0.210652, 6);
    expect(ratios?.alkaliOverAl).toBeCloseTo(0.440684, 6);
    expect(ratios?.sericiteIndex).toBeCloseTo(0.230032 / 0.440684, 5);
    expect(ratios?.feldsparOverAl).toBeNull();
  });

  it('counts calcium twice: anorthite is 1 feldspar equivalent', () => {
    expect(molarRatios({ Al: 19.397, Ca: 14.406, K: 0, Na: 0 })?.feldsparOverAl).toBeCloseTo(1, 5);
  });

  it('masks rock with little aluminium, and has no sericite index without alkalis', () => {
    expect(molarRatios({ Al: 0.49, K: 1, Na: 1 })).toBeNull();
    expect(molarRatios({ Al: 0, K: 1, Na: 1 }, 0)).toBeNull();
    expect(molarRatios({ Al: 5, K: 0, Na: 0 })?.sericiteIndex).toBeNull();
  });

  it('does not mind the unit: rescaling changes nothing', () => {
    const grade = fc.double({ min: 0.6, max: 20, noNaN: true });
    fc.assert(
      fc.property(grade, grade, grade, (Al, K, Na) => {
        const whole = molarRatios({ Al, K, Na });
        const half = molarRatios({ Al: Al / 2, K: K / 2, Na: Na / 2 }, 0.1);
        expect(half?.kOverAl).toBeCloseTo(whole?.kOverAl ?? NaN, 10);
        expect(half?.sericiteIndex).toBeCloseTo(whole?.sericiteIndex ?? NaN, 10);
      }),
    );
  });

  it('refuses grades that are none', () => {
    expect(() => molarRatios({ Al: 5, K: NaN, Na: 1 })).toThrow('found NaN');
    expect(() => molarRatios({ Al: 5, K: -1, Na: 1 })).toThrow('found -1');
  });
});

describe('position among three minerals', () => {
  const feldspathic = ALKALI_TRIANGLES['feldspathic'] ?? ['', '', ''];

  it('is the middle of the triangle for the mean of its nodes', () => {
    const { weights, distance } = alkaliPosition({ naOverAl: 1 / 3, kOverAl: 4 / 9 }, [
      'K-feldspar',
      'muscovite',
      'albite',
    ]);
    weights.forEach((weight) => expect(weight).toBeCloseTo(1 / 3, 12));
    expect(distance).toBe(0);
  });

  it('puts fresh feldspathic rock on the line x + y = 1', () => {
    const { weights } = alkaliPosition({ naOverAl: 0.3, kOverAl: 0.7 }, feldspathic);
    [0.7, 0, 0.3].forEach((weight, i) => expect(weights[i]).toBeCloseTo(weight, 12));
  });

  it('takes a point outside to the nearest edge and keeps its distance', () => {
    const { weights, distance } = alkaliPosition({ naOverAl: 1, kOverAl: 1 }, feldspathic);
    [0.5, 0, 0.5].forEach((weight, i) => expect(weights[i]).toBeCloseTo(weight, 12));
    expect(distance).toBeCloseTo(Math.SQRT1_2, 12);
    const corner = alkaliPosition({ naOverAl: 2, kOverAl: -1 }, feldspathic);
    expect(corner.weights[2]).toBeCloseTo(1, 12);
  });

  it('has weights of 0 to 1 that sum to 1 and return the point inside', () => {
    const share = fc.double({ min: 0, max: 1, noNaN: true });
    fc.assert(
      fc.property(share, share, (naOverAl, kOverAl) => {
        for (const minerals of Object.values(ALKALI_TRIANGLES)) {
          const { weights, distance } = alkaliPosition({ naOverAl, kOverAl }, minerals);
          expect(weights.reduce((sum, weight) => sum + weight, 0)).toBeCloseTo(1, 12);
          expect(Math.min(...weights)).toBeGreaterThanOrEqual(0);
          const back = weights.reduce((sum, w, i) => sum + w * nodeOf(minerals[i]!).naOverAl, 0);
          if (distance === 0) expect(back).toBeCloseTo(naOverAl, 10);
        }
      }),
    );
  });

  it('refuses minerals in one line and points that are none', () => {
    const flat = ['anorthite', 'muscovite', 'K-feldspar'] as const;
    expect(() => alkaliPosition({ naOverAl: 0, kOverAl: 0 }, flat)).toThrow(/span a triangle/);
    expect(() => alkaliPosition({ naOverAl: NaN, kOverAl: 0 }, feldspathic)).toThrow(/found NaN/);
  });
});
