import { describe, expect, it } from 'vitest';
import { coneCurves, kambContours, netPoint } from '#src/components/charts/stereonet-marks.ts';
import { planeText } from '#src/components/charts/stereonet-key.tsx';
import { netLayout } from '#src/components/charts/stereonet.tsx';

describe('the net', () => {
  // r = sqrt(2) sin(colatitude / 2) of the equal-area projection, worked by hand
  it.each([
    [90, 0, 1, 0],
    [90, 30, Math.SQRT1_2, 0],
    [0, 90, 0, 0],
    [45, 60, 0.258819, 0.258819],
  ])('puts trend %i plunge %i at (%f, %f)', (trend, plunge, x, y) => {
    const [px, py] = netPoint(trend, plunge);
    expect(px).toBeCloseTo(x, 6);
    expect(py).toBeCloseTo(y, 6);
  });
});

describe('a cone', () => {
  it('about the vertical is a circle of its own colatitude', () => {
    const [curve = []] = coneCurves({ trend: 0, plunge: 90 }, 30);
    curve.forEach(([x, y]) => expect(Math.hypot(x, y)).toBeCloseTo(Math.SQRT2 * Math.sin((15 * Math.PI) / 180), 9));
  });
  it('that passes the rim is drawn in parts, none of them across the net', () => {
    const curves = coneCurves({ trend: 90, plunge: 5 }, 20);
    expect(curves.length).toBeGreaterThan(1);
    curves.forEach((curve) =>
      curve.slice(1).forEach(([x, y], i) => {
        const [px, py] = curve[i] ?? [0, 0];
        expect(Math.hypot(x - px, y - py)).toBeLessThan(0.3);
      }),
    );
  });
});

describe('contours', () => {
  it('close about a cluster, at even levels', () => {
    const lines = Array.from({ length: 60 }, (_value, i) => ({ trend: 170 + (i % 20), plunge: 50 + (i % 7), sureness: 'sure' as const }));
    const levels = kambContours(lines).map(({ level }) => level);
    expect(levels[0]).toBe(2);
    expect(levels.every((level) => level % 2 === 0)).toBe(true);
  });
  it('need three readings', () => {
    expect(kambContours([{ trend: 0, plunge: 10, sureness: 'sure' }])).toEqual([]);
  });
});

it('writes a plane as dip and three figures of direction', () => {
  expect(planeText({ dip: 34.4, dipDirection: 7.6 })).toBe('34\u2009/\u2009008');
  expect(planeText({ dip: 80, dipDirection: 359.8 })).toBe('80\u2009/\u2009000');
});

it('keeps net and key inside a wide box and a tall one', () => {
  for (const box of [{ width: 366, height: 250 }, { width: 300, height: 420 }]) {
    const { radius, cx, cy, keyX, keyY } = netLayout(box);
    expect(cx - radius).toBeGreaterThanOrEqual(0);
    expect(cy + radius).toBeLessThanOrEqual(box.height);
    expect(keyX + 136).toBeLessThanOrEqual(box.width);
    expect(keyY).toBeGreaterThan(0);
  }
});
