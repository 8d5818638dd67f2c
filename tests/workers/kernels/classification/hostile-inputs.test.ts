import { classMoments } from '#kernels/classification/class-moments.ts';
import { classifyByHole } from '#kernels/classification/classify-by-hole.ts';
import { linearDiscriminant } from '#kernels/classification/linear-discriminant.ts';
import { nearestNeighbours } from '#kernels/classification/nearest-neighbours.ts';
import { codesOf, testHostileInputs } from '#tests/support/hostile-inputs.ts';

const rowsOf = ({ length }: Float64Array) => Int32Array.from({ length }, (_, i) => i);
const fourHoles = ({ length }: Float64Array) =>
  Int32Array.from({ length: 5 }, (_, i) => Math.floor((i * length) / 4));
const byHole =
  (classifierOf: (columns: Float64Array[]) => ReturnType<typeof linearDiscriminant>) =>
  (x: Float64Array, y: Float64Array, lengthM: Float64Array) =>
    classifyByHole({
      classifier: classifierOf([x, y]),
      logged: codesOf(x, 2),
      holeStarts: fourHoles(x),
      lengthM,
      seed: 1,
    });

testHostileInputs([
  [
    'classMoments',
    (x, y) =>
      classMoments({ columns: [x, y], rows: rowsOf(x), classOf: codesOf(x, 2).codes, nClasses: 2 }),
  ],
  ['linearDiscriminant', byHole((columns) => linearDiscriminant(columns)), 'missing'],
  ['linearDiscriminant, priors', byHole((x) => linearDiscriminant(x, 'frequency')), 'missing'],
  ['nearestNeighbours', byHole((columns) => nearestNeighbours(columns, 3)), 'missing'],
]);
