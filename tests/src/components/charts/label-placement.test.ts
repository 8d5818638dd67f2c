import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { overlaps, placeLabels, spreadAlong } from '#src/components/charts/label-placement.ts';
import { lineLabels } from '#src/components/charts/line-labels.ts';
import { fitText, textWidth, wrapText } from '#src/components/charts/text-width.ts';

const ROOM = { x: 0, y: 0, width: 400, height: 300 };
const box = (label: { x: number; y: number }) => ({ x: label.x - 20, y: label.y - 7, width: 40, height: 14 });

describe('labels beside points', () => {
  it('stand on the side they prefer when it is free', () => {
    const [label] = placeLabels([{ id: 'Cu', x: 100, y: 100, width: 40, height: 14, weight: 1, towards: 0, gap: 4 }], ROOM);
    expect(label).toEqual({ id: 'Cu', x: 124, y: 100 });
  });

  it('never overlap each other, an obstacle or the edge', () => {
    const point = fc.record({ x: fc.integer({ min: 0, max: 400 }), y: fc.integer({ min: 0, max: 300 }), weight: fc.integer({ min: 0, max: 9 }) });
    fc.assert(
      fc.property(fc.array(point, { maxLength: 30 }), (points) => {
        const obstacle = { x: 150, y: 100, width: 80, height: 60 };
        const placed = placeLabels(points.map((at, i) => ({ ...at, id: String(i), width: 40, height: 14 })), ROOM, [obstacle]).map(box);
        placed.forEach((one, i) => {
          expect(overlaps(one, obstacle)).toBe(false);
          expect(one.x >= 0 && one.y >= 0 && one.x + 40 <= 400 && one.y + 14 <= 300).toBe(true);
          placed.slice(i + 1).forEach((other) => expect(overlaps(one, other)).toBe(false));
        });
      }),
    );
  });

  it('give way by weight: the heaviest is kept where only one fits', () => {
    const narrow = { x: 0, y: 0, width: 44, height: 40 };
    const same = { x: 22, y: 30, width: 40, height: 14, turns: 0 };
    expect(placeLabels([{ ...same, id: 'light', weight: 1 }, { ...same, id: 'heavy', weight: 2 }], narrow).map(({ id }) => id)).toEqual(['heavy']);
  });
});

describe('labels along an axis', () => {
  it('move apart just enough and keep their order', () => {
    expect(spreadAlong([50, 52], [20, 20], 4, 0, 200)).toEqual([50, 74]);
    expect(spreadAlong([195, 198], [20, 20], 4, 0, 200)).toEqual([166, 190]);
  });
});

describe('names of lines', () => {
  const one = { label: 'stability', points: [0, 50, 100, 150].map((px) => ({ px, py: 40 })) };
  const two = { label: 'silhouette', points: [0, 50, 100, 150].map((px) => ({ px, py: 90 })) };
  it('stand close to their own line and cross none', () => {
    const placed = lineLabels([one, two], { x: 0, y: 0, width: 160, height: 130 });
    expect(placed.map(({ id }) => id)).toEqual(['stability', 'silhouette']);
    placed.forEach(({ y }, i) => {
      const own = i === 0 ? 40 : 90;
      expect(Math.abs(y - own)).toBeLessThanOrEqual(22);
      [40, 90].forEach((line) => expect(Math.abs(y - line)).toBeGreaterThanOrEqual(9));
    });
  });
});

describe('text', () => {
  it('is measured wider for bold and wide letters', () => {
    expect(textWidth('MMMM', 12)).toBeGreaterThan(textWidth('iiii', 12));
    expect(textWidth('Cu', 12, 'bold')).toBeGreaterThan(textWidth('Cu', 12));
    expect(textWidth('2100', 10, 'mono')).toBeCloseTo(24, 10);
  });
  it('is cut with an ellipsis, or not written at all', () => {
    expect(fitText('Hanging-wall andesite', 60, 12)).toMatch(/^Hang.*…$/);
    expect(fitText('Hanging-wall andesite', 4, 12)).toBe('');
    expect(fitText('HW', 60, 12)).toBe('HW');
  });
  it('breaks at spaces into the lines allowed', () => {
    expect(wrapText('cumulative share of length', 90, 12, 2)).toEqual(['cumulative', 'share of length']);
  });
});
