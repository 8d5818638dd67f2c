import fc from 'fast-check';
import type { IntervalTable } from '#kernels/intervals/interval-table.ts';

export function tableOf(intervals: readonly (readonly [number, number])[]): IntervalTable {
  return {
    fromM: Float64Array.from(intervals, ([from]) => from),
    toM: Float64Array.from(intervals, ([, to]) => to),
  };
}

/** Tables without overlaps: gaps and lengths in whole centimetres, so that no end is near another. */
export const apartTable = fc
  .array(fc.tuple(fc.integer({ min: 0, max: 300 }), fc.integer({ min: 1, max: 400 })), {
    maxLength: 20,
  })
  .map((steps) => {
    let depth = 0;
    return tableOf(
      steps.map(([gap, length]) => {
        const from = depth + gap;
        depth = from + length;
        return [from / 100, depth / 100] as const;
      }),
    );
  });
