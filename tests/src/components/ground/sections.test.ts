import { expect, it } from 'vitest';
import { sectionLines, usualLine } from '#src/components/ground/sections.ts';

const hole = (name: string, from: readonly [number, number], to: readonly [number, number]) => ({
  name,
  intervals: [],
  points: [
    { depthM: 0, east: from[0], north: from[1], elevation: 100 },
    { depthM: 100, east: to[0], north: to[1], elevation: 20 },
  ],
});

it('finds the fences that inclined holes were drilled on, a little off line', () => {
  const lines = sectionLines([
    hole('A1', [100, 0], [40, 1]), hole('A2', [200, 2], [140, 3]),
    hole('B1', [100, 50], [40, 51]),
    hole('C1', [100, 100], [40, 99]), hole('C2', [150, 101], [90, 100]), hole('C3', [200, 99], [140, 99]),
  ]);
  expect(lines.map(({ atM, letter, holes }) => [atM, letter, holes.length])).toEqual([[2, 'N', 2], [51, 'N', 1], [100, 'N', 3]]);
  expect(lines[0]?.plane).toMatchObject({ azimuthDeg: 90, halfWidthM: 25 });
  expect(usualLine(lines)).toBe(2);
});

it('runs sections north where holes do, and along the wider spread of upright holes', () => {
  expect(sectionLines([hole('A', [0, 0], [0, 60]), hole('B', [80, 0], [80, 60])]).map(({ letter }) => letter)).toEqual(['E', 'E']);
  const upright = sectionLines([hole('A', [0, 0], [0, 0]), hole('B', [0, 100], [0, 100]), hole('C', [20, 50], [20, 50])]);
  expect(upright[0]?.plane.azimuthDeg).toBe(0);
});

it('has no section without holes, and one for a single hole', () => {
  expect(sectionLines([])).toEqual([]);
  expect(sectionLines([hole('A', [0, 0], [-50, 0])])).toHaveLength(1);
});
