import fc from 'fast-check';
import { expect, it } from 'vitest';
import { faultBlocks } from '#kernels/recipe/fault-blocks.ts';
import { distancesToFault, faultCrossing, sidesOfFault } from '#kernels/recipe/fault-sides.ts';

const fault = { name: 'F1', x: 0, y: 0, z: 0, dip: 60, dipDirection: 90 };

it('measures from the plane 60 to 090 through the origin (computed from the normal)', () => {
  const distances = distancesToFault(Float64Array.of(100, 0, 0, 0, 50, -100, 0, 7, 0), fault);
  expect(distances[0]).toBeCloseTo(86.60254, 6);
  expect(distances[1]).toBeCloseTo(-50, 9);
  expect(distances[2]).toBeCloseTo(0, 9);
});

it('tells the hanging wall: a point straight above the plane is above', () => {
  const attitude = fc.record({
    dip: fc.integer({ min: 0, max: 89 }),
    dipDirection: fc.integer({ min: 0, max: 359 }),
  });
  const metres = fc.double({ min: -1000, max: 1000, noNaN: true });
  fc.assert(
    fc.property(attitude, metres, metres, metres, (plane, x, y, z) => {
      const at = { name: 'F', x, y, z, ...plane };
      const distances = distancesToFault(Float64Array.of(x, y, z + 10, x, y, z - 10), at);
      expect(distances[0]).toBeCloseTo(10 * Math.cos((plane.dip * Math.PI) / 180), 8);
      expect([...sidesOfFault(distances).codes]).toEqual([0, 1]);
    }),
  );
});

it('names east as above for a vertical fault, whichever way its dip direction is given', () => {
  const points = Float64Array.of(5, 0, 0, -5, 0, 0);
  for (const dipDirection of [90, 270]) {
    const sides = sidesOfFault(distancesToFault(points, { ...fault, dip: 90, dipDirection }));
    expect([...sides.codes].map((code) => sides.levels[code])).toEqual(['above', 'below']);
  }
});

it('has no side for a point without position, above for one on the plane', () => {
  const distances = distancesToFault(Float64Array.of(NaN, 0, 0, 0, 0, 0), fault);
  expect([...sidesOfFault(distances).codes]).toEqual([-1, 0]);
});

it('finds the crossing in proportion to the distances', () => {
  expect(faultCrossing(3, -1)).toBe(0.75);
  expect(faultCrossing(-2, 2)).toBe(0.5);
  expect(faultCrossing(1, 2)).toBeNull();
  expect(faultCrossing(-1, NaN)).toBeNull();
  expect(faultCrossing(1, NaN)).toBeNull();
});

it('refuses faults and points that are none', () => {
  expect(() => distancesToFault(new Float64Array(4), fault)).toThrow(
    '4 numbers do not fill rows of 3',
  );
  expect(() => distancesToFault(new Float64Array(3), { ...fault, x: NaN })).toThrow(
    'point on fault F1',
  );
  expect(() => distancesToFault(new Float64Array(3), { ...fault, dip: 120 })).toThrow('found 120');
});

it('writes a block as signs in the order of the faults, with a dot where one has stopped', () => {
  const first = Float64Array.of(5, 5, -5, -5, NaN);
  const second = Float64Array.of(1, -1, 1, -1, 1);
  const blocks = (stops: Parameters<typeof faultBlocks>[1]) => {
    const { levels, codes } = faultBlocks([first, second], stops);
    return [...codes].map((code) => levels[code] ?? null);
  };
  expect(blocks([])).toEqual(['++', '+-', '-+', '--', null]);
  expect(blocks([{ fault: 1, stopsAt: 0, existsOn: 'above' }])).toEqual([
    '++',
    '+-',
    '-.',
    '-.',
    null,
  ]);
  expect(faultBlocks([])).toEqual({ levels: [], codes: new Int32Array(0) });
  expect(() => blocks([{ fault: 1, stopsAt: 1, existsOn: 'above' }])).toThrow(
    'found 1 stopping at 1',
  );
  expect(() => faultBlocks([first, new Float64Array(1)])).toThrow(
    'expected 5 distances to every fault',
  );
});
