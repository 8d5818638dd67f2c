import { describe, expect, it } from 'vitest';
import { columnLimits } from '#kernels/units/column-limits.ts';

const point = { decimalMark: '.' } as const;

describe('columnLimits', () => {
  it('finds limits written with < and repeated negative numbers', () => {
    const cells = ['<0.5', '1.2', '-0.2', '-0.2', '<0.5', '-3', '>100', '-99', '-99', ''];
    expect(columnLimits(cells, point)).toEqual({
      knownLimits: [0.2, 0.5],
      columnLimit: 0.5,
      columnUpperLimit: 100,
    });
  });

  it('counts a single negative number when it also stands with <', () => {
    expect(columnLimits(['<2', '-2', '<1'], point)).toEqual({
      knownLimits: [1, 2],
      columnLimit: 2,
      columnUpperLimit: null,
    });
  });

  it('takes the larger of limits seen equally often', () => {
    expect(columnLimits(['<1', '<5'], point).columnLimit).toBe(5);
  });

  it('finds none in a column of numbers or of nothing', () => {
    const none = { knownLimits: [], columnLimit: null, columnUpperLimit: null };
    expect(columnLimits(['1', '2', 'BDL', 'x'], point)).toEqual(none);
    expect(columnLimits([], point)).toEqual(none);
  });
});
