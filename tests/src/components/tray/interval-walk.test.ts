import { describe, expect, it } from 'vitest';
import { matchingHoles } from '#src/components/tray/hole-picker.tsx';
import { chosenRuns, intervalAt, rowsAlong, rowsBetween, stepFrom } from '#src/components/tray/interval-walk.ts';
import { keyRoom } from '#src/components/tray/rock-key.tsx';
import { ALL_TRACKS } from '#src/components/tray/tray-types.ts';
import { troughLayout } from '#src/components/tray/trough-layout.ts';

const plain = { groupSlot: null, membership: null, grade: null, domain: null };
// 10–12, 12–14, a gap, 20–22
const intervals = [
  { ...plain, row: 100, fromM: 10, toM: 12 },
  { ...plain, row: 101, fromM: 12, toM: 14 },
  { ...plain, row: 102, fromM: 20, toM: 22 },
];

describe('finding intervals', () => {
  it.each([
    [9.9, null],
    [10, 0],
    [12, 1],
    [13.99, 1],
    [14, null],
    [21, 2],
    [30, null],
  ])('%f m lies in interval %s', (depth, index) => {
    expect(intervalAt(intervals, depth)).toBe(index);
  });
});

describe('a drag', () => {
  it('takes every interval it touches, either way round', () => {
    expect(rowsBetween(intervals, 11, 13)).toEqual([100, 101]);
    expect(rowsBetween(intervals, 21, 13)).toEqual([101, 102]);
    expect(rowsBetween(intervals, 15, 18)).toEqual([]);
  });
  it('takes one interval by a click within it', () => {
    expect(rowsBetween(intervals, 11, 11)).toEqual([100]);
  });
});

describe('steps', () => {
  it('begin at the first interval on show and stop at the ends', () => {
    expect(stepFrom(intervals, null, 1, 13)).toBe(1);
    expect(stepFrom(intervals, null, 1, 99)).toBe(2);
    expect(stepFrom(intervals, 2, 1, 0)).toBe(2);
    expect(stepFrom(intervals, 0, -1, 0)).toBe(0);
    expect(stepFrom([], null, 1, 0)).toBeNull();
  });
  it('extend from an anchor in both directions', () => {
    expect(rowsAlong(intervals, 2, 1)).toEqual([101, 102]);
    expect(rowsAlong(intervals, 0, 2)).toEqual([100, 101, 102]);
  });
});

it('marks unbroken stretches of what is chosen', () => {
  expect(chosenRuns(intervals, () => true)).toEqual([{ fromM: 10, toM: 14 }, { fromM: 20, toM: 22 }]);
  expect(chosenRuns(intervals, (row) => row === 101)).toEqual([{ fromM: 12, toM: 14 }]);
});

it('gives all five tracks 78 px and closes up over tracks taken away', () => {
  const full = troughLayout(ALL_TRACKS);
  expect(full.height).toBe(78);
  const some = troughLayout(new Set(['rock', 'group'] as const));
  expect(some.tracks.map(({ name, top }) => [name, top])).toEqual([['rock', 1.5], ['group', 16.5]]);
  expect(some.height).toBeLessThan(full.height);
});

it('keeps room for the rest of the rock key', () => {
  const labels = ['andesite', 'dolerite', 'rhyodacite', 'chlorite rock', 'massive sulphide', 'cover'];
  expect(keyRoom(labels, 2000)).toBe(6);
  expect(keyRoom(labels, 300)).toBeLessThan(6);
  expect(keyRoom(labels, 20)).toBe(0);
});

it('offers the holes whose name begins with what is typed first', () => {
  expect(matchingHoles(['A-12', '12-B', 'C-3'], '12')).toEqual(['12-B', 'A-12']);
});
