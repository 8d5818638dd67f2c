import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { UNASSIGNED } from '#kernels/recipe/domain-codes.ts';
import { joinShortRuns, type RunLengthRule } from '#kernels/recipe/run-length.ts';
import { categoryFrom } from '#kernels/tables/category.ts';

type Piece = readonly [code: string, lengthM: number];

function hole(pieces: readonly Piece[]) {
  let depth = 0;
  const ends = pieces.map(([, length]) => [depth, (depth += length)] as const);
  const intervals = {
    holeStarts: Int32Array.of(0, pieces.length),
    fromM: Float64Array.from(ends, ([from]) => from),
    toM: Float64Array.from(ends, ([, to]) => to),
  };
  return { intervals, domains: categoryFrom(pieces.map(([code]) => code)) };
}

/** Runs of a result as text: A11 B8. */
function runs(pieces: readonly Piece[], rule?: RunLengthRule): string {
  const { intervals, domains } = hole(pieces);
  const result = joinShortRuns(intervals, domains, rule).domains;
  const joined: [string, number][] = [];
  pieces.forEach(([, length], i) => {
    const code = result.levels[result.codes[i]!] ?? '?';
    const last = joined.at(-1);
    if (last?.[0] === code) last[1] += length;
    else joined.push([code, length]);
  });
  return joined.map(([code, length]) => `${code}${length}`).join(' ');
}

const pieces = (text: string): Piece[] =>
  text
    .split(' ')
    .map((piece) => [piece.replace(/[\d.]+$/, ''), Number(/[\d.]+$/.exec(piece)?.[0])]);

describe('joining', () => {
  it.each([
    // Worked by hand from the rule, minimum 3 m.
    ['A6 B1 A4 B2 C1 B5 C3', 'A11 B8 C3'],
    ['A5 B2 C4 D2.5 A1', 'A7 C4 D3.5'],
    ['A5 B5', 'A5 B5'],
    ['A1', 'A1'],
    ['A1 B1', 'B2'],
    ['A4 B1 C4', 'A5 C4'],
    ['A4 B1 C5', 'A4 C6'],
  ])('%s becomes %s', (before, after) => {
    expect(runs(pieces(before))).toBe(after);
  });

  it('keeps a minimum of its own for a code', () => {
    const rule = { minLengthM: 3, minLengthByCode: new Map([['B', 1]]) };
    expect(runs(pieces('A6 B1 A4'), rule)).toBe('A6 B1 A4');
    expect(runs(pieces('A6 B0.5 A4'), rule)).toBe('A10.5');
  });

  it('neither changes nor crosses locked and unassigned intervals', () => {
    expect(
      runs([
        ['A', 5],
        [UNASSIGNED, 1],
        ['A', 5],
      ]),
    ).toBe(`A5 ${UNASSIGNED}1 A5`);
    expect(
      runs([
        ['B', 1],
        [UNASSIGNED, 1],
        ['A', 5],
      ]),
    ).toBe(`B1 ${UNASSIGNED}1 A5`);
    expect(runs(pieces('A5 B1 A5'), { isLocked: Uint8Array.of(0, 1, 0) })).toBe('A5 B1 A5');
  });

  it('does not cross faults, gaps or the ends of holes, and flags what stays short', () => {
    const { intervals, domains } = hole(pieces('A5 B1 A5'));
    const faulted = joinShortRuns({ ...intervals, isBreakBefore: Uint8Array.of(0, 1, 1) }, domains);
    expect([...faulted.isShort]).toEqual([0, 1, 0]);
    expect(faulted.changedMetres).toBe(0);
    const apart = { ...intervals, fromM: Float64Array.of(0, 6, 8), toM: Float64Array.of(5, 7, 13) };
    expect([...joinShortRuns(apart, domains).isShort]).toEqual([0, 1, 0]);
    const holes = {
      holeStarts: Int32Array.of(0, 1, 2, 3),
      fromM: new Float64Array(3),
      toM: Float64Array.of(5, 1, 5),
    };
    expect([...joinShortRuns(holes, domains).isShort]).toEqual([0, 1, 0]);
  });

  it('reports metres before and after, and a change of more than 15 %', () => {
    const { intervals, domains } = hole(pieces('A4 B2 A4'));
    const shares: number[] = [];
    const result = joinShortRuns(intervals, domains, {}, (share) => shares.push(share));
    expect(result.before).toEqual([
      { code: 'A', intervals: 2, metres: 8 },
      { code: 'B', intervals: 1, metres: 2 },
    ]);
    expect(result.after).toEqual([
      { code: 'A', intervals: 3, metres: 10 },
      { code: 'B', intervals: 0, metres: 0 },
    ]);
    expect(result).toMatchObject({ changedMetres: 2, changedShare: 0.2 });
    expect(result.notes).toEqual([
      'The run-length rule changes 20.0 % of the metres, more than 15 %.',
    ]);
    expect(shares).toEqual([1]);
  });

  it('is idempotent, conserves metres and leaves only lone runs short', () => {
    const piece = fc.tuple(
      fc.constantFrom('A', 'B', 'C', UNASSIGNED),
      fc.integer({ min: 1, max: 8 }),
    );
    fc.assert(
      fc.property(fc.array(piece, { minLength: 1, maxLength: 30 }), (list) => {
        const { intervals, domains } = hole(list.map(([code, half]) => [code, half / 2] as const));
        const once = joinShortRuns(intervals, domains);
        const twice = joinShortRuns(intervals, once.domains);
        expect([...twice.domains.codes]).toEqual([...once.domains.codes]);
        expect(twice.changedMetres).toBe(0);
        const sum = (codes: typeof once.before) =>
          codes.reduce((total, { metres }) => total + metres, 0);
        expect(sum(once.after)).toBeCloseTo(sum(once.before), 9);
        const text = (row: number) =>
          once.domains.levels[once.domains.codes[row] ?? -1] ?? UNASSIGNED;
        list.forEach((_, row) => {
          if (once.isShort[row] !== 1) return;
          for (const side of [row - 1, row + 1])
            expect([text(row), UNASSIGNED]).toContain(text(side));
        });
      }),
    );
  });

  it('refuses bad lengths and shapes', () => {
    const { intervals, domains } = hole(pieces('A5 B1'));
    expect(() => joinShortRuns(intervals, domains, { minLengthM: -1 })).toThrow(
      'expected a shortest run >= 0 m for A',
    );
    expect(() => joinShortRuns(intervals, domains, { isLocked: new Uint8Array(1) })).toThrow(
      'expected 2 locks, found 1',
    );
    expect(() => joinShortRuns(intervals, categoryFrom(['A']))).toThrow(
      'expected 2 domain codes, found 1',
    );
  });
});
