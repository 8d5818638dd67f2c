import { expect, it } from 'vitest';
import { KernelError } from '#kernels/kernel-error.ts';
import { directionsOf, faultOf, HOSTILE_COLUMNS, ordinary } from './hostile-inputs.ts';

it.each<[string | null, () => unknown, boolean]>([
  [null, () => ({ mean: 1, parts: [Float64Array.of(1, -0)], note: null }), false],
  ['mean: NaN', () => ({ mean: NaN }), false],
  [null, () => ({ mean: NaN }), true],
  ['1: Infinity', () => [0, Infinity], true],
  ['parts: 1: -Infinity', () => ({ parts: Float64Array.of(1, -Infinity) }), true],
  ['a: NaN', () => new Map([['a', NaN]]), false],
  ['text 12 of NaN', () => '12 of NaN', false],
  [
    null,
    () => {
      throw new KernelError('shape', 'expected rows, found none');
    },
    false,
  ],
  [
    'threw KernelError',
    () => {
      throw new KernelError('shape', '');
    },
    false,
  ],
  [
    'threw TypeError: no',
    () => {
      throw new TypeError('no');
    },
    true,
  ],
])('finds %j', (fault, call, isNaNMissing) => {
  expect(faultOf(call, isNaNMissing)).toBe(fault);
});

it('ordinary columns differ among themselves and hold different values', () => {
  const columns = [0, 1, 2, 3].map((turn) => ordinary(turn));
  for (const column of columns) {
    expect(new Set(column).size).toBe(column.length);
    expect(column.every((value) => value >= 1 && value < 6)).toBe(true);
  }
  expect(new Set(columns.map((column) => column.join())).size).toBe(4);
  const directions = directionsOf(ordinary(0), ordinary(1), ordinary(2));
  expect(Math.hypot(...directions.subarray(0, 3))).toBeCloseTo(1, 12);
});

it('holds the inputs kernels must bear: NaN, infinities, -0, constants, one row, no row', () => {
  const values = HOSTILE_COLUMNS.flatMap(([, column]) => [...column]);
  for (const value of [NaN, Infinity, -Infinity, -0])
    expect(values.some((found) => Object.is(found, value))).toBe(true);
  const lengths = new Set(HOSTILE_COLUMNS.map(([, column]) => column.length));
  expect([...lengths].sort((a, b) => a - b).slice(0, 2)).toEqual([0, 1]);
});
