import { expect, it } from 'vitest';
import { KernelError } from '#kernels/kernel-error.ts';
import { categoryFrom, type Category } from '#kernels/tables/category.ts';

const ROWS = 40;
const GOLDEN = (Math.sqrt(5) - 1) / 2;

/** Different values from 1 to 6, the same every time; `turn` gives another list of them. */
export const ordinary = (turn = 0, rows = ROWS): Float64Array =>
  Float64Array.from({ length: rows }, (_, i) => 1 + 5 * (((i + 1) ** (1 + turn / 3) * GOLDEN) % 1));

const withOne = (value: number) => ordinary().map((x, i) => (i === 5 ? value : x));
const all = (value: number, rows = ROWS) => new Float64Array(rows).fill(value);

/** What a column of a real file may hold at its worst. */
export const HOSTILE_COLUMNS: readonly (readonly [name: string, column: Float64Array])[] = [
  ['a NaN', withOne(NaN)],
  ['NaN only', all(NaN)],
  ['an infinity', withOne(Infinity)],
  ['a negative infinity', withOne(-Infinity)],
  ['infinities only', all(Infinity)],
  ['a negative zero', withOne(-0)],
  ['negative zeros only', all(-0)],
  ['a negative value', withOne(-3)],
  ['a constant', all(3)],
  ['a constant that binary rounds', all(0.1)],
  ['a constant but for one row', all(3).map((x, i) => x + Number(i === 5))],
  ['no row', all(1, 0)],
  ['one row', all(1, 1)],
  ['one row of NaN', all(NaN, 1)],
  ['two rows', Float64Array.of(1, 2)],
];

/** What is wrong with an answer, or null: numbers are finite, and NaN only where it means missing. */
function faultIn(answer: unknown, isNaNMissing: boolean): string | null {
  if (typeof answer === 'number')
    return Number.isFinite(answer) || (isNaNMissing && Number.isNaN(answer)) ? null : `${answer}`;
  if (typeof answer === 'string') return /NaN|Infinity/.test(answer) ? `text ${answer}` : null;
  if (answer === null || typeof answer !== 'object') return null;
  const entries: Iterable<[unknown, unknown]> =
    answer instanceof Map ? answer : Object.entries(answer);
  for (const [key, value] of entries) {
    const fault = faultIn(value, isNaNMissing);
    if (fault) return `${String(key)}: ${fault}`;
  }
  return null;
}

/** True where an answer says something: a finite number or a text stands in it. */
function saysSomething(answer: unknown): boolean {
  if (typeof answer === 'number') return Number.isFinite(answer);
  if (typeof answer === 'string') return answer !== '';
  if (answer === null || typeof answer !== 'object') return false;
  return Object.values(answer instanceof Map ? [...answer.values()] : answer).some(saysSomething);
}

/** What is wrong with a call, or null: it answers without fault, or refuses with a reason. */
export function faultOf(call: () => unknown, isNaNMissing: boolean): string | null {
  try {
    return faultIn(call(), isNaNMissing);
  } catch (error) {
    if (error instanceof KernelError && error.code !== '' && error.message !== '') return null;
    return `threw ${String(error)}`;
  }
}

/** A kernel of columns of one length; `missing` where NaN in its answer means a missing row. */
export type HostileCase = readonly [
  name: string,
  kernel: (...columns: Float64Array[]) => unknown,
  missing?: 'missing',
];

/**
 * Tests kernels of as many columns as they name: ordinary columns are answered, and whatever stands
 * in one of them or in all is answered with finite numbers or refused with a reason. All columns
 * alike is also the case of a table of deficient rank.
 */
export function testHostileInputs(cases: readonly HostileCase[]): void {
  const named = cases.map(([name, kernel, missing]) => ({ name, kernel, missing }));
  it.each(named)('$name: finite answers, or a refusal with a reason', ({ kernel, missing }) => {
    const isNaNMissing = missing === 'missing';
    const count = kernel.length;
    expect(count).toBeGreaterThan(0);
    const usual = (rows?: number) => Array.from({ length: count }, (_, j) => ordinary(j, rows));
    const answer = kernel(...usual());
    expect(faultIn(answer, isNaNMissing)).toBeNull();
    expect(answer).toSatisfy(saysSomething);
    const faults: string[] = [];
    const tryOut = (what: string, columns: Float64Array[]) => {
      const fault = faultOf(() => kernel(...columns), isNaNMissing);
      if (fault) faults.push(`${what}: ${fault}`);
    };
    for (const [what, hostile] of HOSTILE_COLUMNS) {
      for (let place = 0; place < count; place++)
        tryOut(`${what} in column ${place}`, usual(hostile.length).with(place, hostile.slice()));
      tryOut(`${what} in every column`, new Array<Float64Array>(count).fill(hostile));
    }
    tryOut('equal columns', new Array<Float64Array>(count).fill(ordinary()));
    expect(faults).toEqual([]);
  });
}

/** Codes of as many rows as a column has, `levels` of them in turn. */
export function codesOf({ length }: Float64Array, levels: number): Category {
  return categoryFrom(Array.from({ length }, (_, i) => 'ABCDEFG'.charAt(i % levels)));
}

/** Two holes of half the rows each; one of a single row. */
export function halves({ length }: Float64Array): Int32Array {
  return length < 2 ? Int32Array.of(0, length) : Int32Array.of(0, length >> 1, length);
}

/** Intervals of a metre, one below the other, as many as a column has rows. */
export function metresOf({ length }: Float64Array): { fromM: Float64Array; toM: Float64Array } {
  const fromM = Float64Array.from({ length }, (_, i) => i);
  return { fromM, toM: fromM.map((top) => top + 1) };
}

/** Unit vectors, row-major, in the direction of three columns about their middle. */
export function directionsOf(x: Float64Array, y: Float64Array, z: Float64Array): Float64Array {
  const rows = Array.from(x, (east, i) => [east - 3.5, y[i]! - 3.5, z[i]! - 3.5] as const);
  return Float64Array.from(rows.flatMap((v) => v.map((part) => part / Math.hypot(...v))));
}
