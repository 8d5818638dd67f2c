import { linearDiscriminant } from '#kernels/classification/linear-discriminant.ts';
import { nearestNeighbours } from '#kernels/classification/nearest-neighbours.ts';
import { codeLikeness } from '#kernels/logging/code-likeness.ts';
import { mapCodes } from '#kernels/logging/code-mapping.ts';
import { centreDistances, codeSpace, standardisedDistances } from '#kernels/logging/code-space.ts';
import { synonymGroups } from '#kernels/logging/code-synonyms.ts';
import { agreementOf } from '#kernels/logging/confusion.ts';
import { consolidationTree } from '#kernels/logging/consolidation-tree.ts';
import { suspectMislogging } from '#kernels/logging/mislogging.ts';
import { nestedVariance } from '#kernels/logging/nested-variance.ts';
import { rareCodes } from '#kernels/logging/rare-codes.ts';
import { codesOf, halves, metresOf, testHostileInputs } from '#tests/support/hostile-inputs.ts';

const few = { seed: 1, draws: 19 };
/** A symmetric table of four codes from the first values of a column. */
const square = (column: Float64Array) =>
  Float64Array.from({ length: column.length < 16 ? column.length : 16 }, (_, at) => {
    const [row, col] = [at >> 2, at & 3];
    return row === col ? 0 : column[Math.min(row, col) + Math.max(row, col)]!;
  });
/** Six times over, so that codes have rows enough in holes enough. */
const tiled = (column: Float64Array) =>
  Float64Array.from({ length: 6 * column.length }, (_, i) => column[i % column.length]!);
const sixHoles = ({ length }: Float64Array) =>
  Int32Array.from({ length: 7 }, (_, i) => (i * length) / 6);
const usesOf = (metres: Float64Array) =>
  Array.from(metres, (m, i) => ({ code: `C${i}`, intervals: 10 + i, metres: m }));

testHostileInputs([
  [
    'codeLikeness',
    (x, y) =>
      codeLikeness(
        {
          coordinates: [x, y],
          codes: codesOf(x, 3),
          parents: ['P', 'P', 'Q'],
          holeStarts: halves(x),
        },
        { ...few, minRows: 5 },
      ),
  ],
  ['codeSpace', (x, y) => codeSpace([x, y], codesOf(x, 3), 5)],
  ['centreDistances', (x, y) => centreDistances(codeSpace([x, y], codesOf(x, 3), 5))],
  ['standardisedDistances', (x, y) => standardisedDistances(codeSpace([x, y], codesOf(x, 3), 5))],
  ['mapCodes', (lengths) => mapCodes(codesOf(lengths, 3), new Map([['A', 'X']]), lengths)],
  [
    'synonymGroups',
    (metres) =>
      synonymGroups(
        usesOf(metres).map((use, i) => ({ ...use, code: i % 2 ? `c ${i - 1}` : use.code })),
      ),
  ],
  ['agreementOf', (table) => agreementOf(table.slice(0, 16), 4)],
  ['consolidationTree', (d, contacts) => consolidationTree(square(d), square(contacts), 4)],
  [
    'suspectMislogging',
    (x, y) => {
      const columns = [tiled(x), tiled(y)];
      const rows = tiled(x);
      const intervals = { holeStarts: sixHoles(rows), ...metresOf(rows) };
      const classifiers = new Map([
        ['linear', linearDiscriminant(columns)],
        ['neighbours', nearestNeighbours(columns, 5)],
      ]);
      return suspectMislogging(intervals, codesOf(rows, 3), classifiers, { seed: 1 });
    },
    'missing',
  ],
  [
    'nestedVariance',
    (x, y) =>
      nestedVariance(
        { coordinates: [x, y], codeOf: codesOf(x, 4).codes, parentOf: Int32Array.of(0, 0, 1, 1) },
        few,
      ),
  ],
  [
    'rareCodes',
    (metres, x, y) =>
      rareCodes({
        uses: usesOf(metres.slice(0, 30)),
        parents: Array.from(metres.slice(0, 30), () => 'P'),
        centres: Array.from(metres.slice(0, 30), (_, i) => Float64Array.of(x[i]!, y[i]!)),
      }),
  ],
]);
