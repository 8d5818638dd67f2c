import { describe, expect, it } from 'vitest';
import { drawByLogRatio } from '#kernels/compositions/log-ratio-draws.ts';
import { replaceByLogRatioEm } from '#kernels/compositions/log-ratio-em.ts';
import { VALUE_STATE } from '#kernels/compositions/replacement.ts';
import { seededRandom } from '#kernels/random.ts';

const { measured, below, missing } = VALUE_STATE;

/** Four correlated lognormal parts; the first is cut at a limit. */
function censored(nRows: number, limit: number) {
  const random = seededRandom(17);
  const columns = Array.from({ length: 4 }, () => new Float64Array(nRows));
  for (let row = 0; row < nRows; row++) {
    const factor = random.normal();
    columns.forEach(
      (column, j) => (column[row] = Math.exp(factor * Math.cos(j) + 0.4 * random.normal())),
    );
  }
  const states = columns.map((column, j) =>
    Uint8Array.from(column, (value) => (j === 0 && value < limit ? below : measured)),
  );
  const truth = columns[0]!;
  columns[0] = truth.map((value) => Math.max(value, limit));
  return { columns, states, truth };
}

describe('drawByLogRatio', () => {
  const { columns, states, truth } = censored(200, 0.7);
  const found = drawByLogRatio(columns, states, { seed: 3, draws: 60, rounds: 2 });

  it('draws every value below detection under its limit, by row', () => {
    const rows = Array.from(truth.keys()).filter((row) => states[0]![row] === below);
    expect(found.cells.map(({ row }) => row)).toEqual(rows);
    for (const { part, values } of found.cells) {
      expect(part).toBe(0);
      expect(values.every((value) => value > 0 && value < 0.7)).toBe(true);
    }
  });

  it('has the expected values of the expectation-maximisation as means of logs', () => {
    const em = replaceByLogRatioEm(columns, states).columns[0]!;
    const meanLog = (values: Float64Array) =>
      values.reduce((sum, value) => sum + Math.log(value), 0) / values.length;
    const offs = found.cells.map(({ row, values }) => meanLog(values) - Math.log(em[row]!));
    expect(Math.abs(offs.reduce((a, b) => a + b, 0) / offs.length)).toBeLessThan(0.05);
    const size = Math.sqrt(offs.reduce((sum, off) => sum + off * off, 0) / offs.length);
    expect(size).toBeLessThan(0.12);
  });

  it('covers the truth: it ranks evenly among the draws', () => {
    const ranks = found.cells.map(
      ({ row, values }) => values.filter((value) => value < truth[row]!).length / values.length,
    );
    expect(ranks.reduce((a, b) => a + b, 0) / ranks.length).toBeCloseTo(0.5, 0);
    const middle = ranks.filter((rank) => rank > 0.1 && rank < 0.9).length / ranks.length;
    expect(middle).toBeGreaterThan(0.6);
    expect(middle).toBeLessThan(0.95);
  });

  it('gives the same draws for the same seed and others for another', () => {
    const options = { seed: 9, draws: 2, rounds: 2 };
    const first = drawByLogRatio(columns, states, options);
    expect(drawByLogRatio(columns, states, options)).toEqual(first);
    expect(drawByLogRatio(columns, states, { ...options, seed: 10 })).not.toEqual(first);
  });

  it('has nothing to draw without values below detection, and leaves incomplete rows out', () => {
    const all = states.map(() => new Uint8Array(200));
    expect(drawByLogRatio(columns, all, { seed: 1 })).toMatchObject({ cells: [], notes: [] });
    const row = states[0]!.indexOf(below);
    const gap = states.map((part, j) => (j === 2 ? part.with(row, missing) : part));
    const fewer = drawByLogRatio(columns, gap, { seed: 1, draws: 1, rounds: 1 });
    expect(fewer.cells).toHaveLength(found.cells.length - 1);
    expect(fewer.notes).toEqual([expect.stringContaining('1 rows miss a part')]);
  });

  it.each([
    ['bad-parameter', { draws: 0 }],
    ['bad-parameter', { rounds: 1.5 }],
  ] as const)('refuses with %s: %j', (code, options) => {
    expect(() => drawByLogRatio(columns, states, { seed: 1, ...options })).toThrow(
      expect.objectContaining({ code }),
    );
  });

  it('refuses parts in a constant ratio, and too few rows', () => {
    const [a = new Float64Array(0), b = new Float64Array(0), c = new Float64Array(0)] = columns;
    expect(() =>
      drawByLogRatio([b, a, b.map((value) => 2 * value), c], [states[1]!, ...states.slice(0, 3)], {
        seed: 1,
      }),
    ).toThrow(expect.objectContaining({ code: 'singular' }));
    const short = (column: Float64Array) => column.subarray(0, 9);
    expect(() =>
      drawByLogRatio(
        columns.map(short),
        states.map((part) => part.subarray(0, 9)),
        { seed: 1 },
      ),
    ).toThrow(expect.objectContaining({ code: 'too-few-rows' }));
  });

  it('stops when the progress report throws', () => {
    const onProgress = () => {
      throw new Error('cancelled');
    };
    expect(() => drawByLogRatio(columns, states, { seed: 1, onProgress })).toThrow('cancelled');
  });
});
