import { assignDomains } from '#kernels/recipe/assign-domains.ts';
import { codeLines } from '#kernels/recipe/code-lines.ts';
import { evaluateCondition } from '#kernels/recipe/condition.ts';
import { metresByCode } from '#kernels/recipe/domain-codes.ts';
import { evaluateRecipe } from '#kernels/recipe/evaluate-recipe.ts';
import { faultBlocks } from '#kernels/recipe/fault-blocks.ts';
import { distancesToFault, faultCrossing, sidesOfFault } from '#kernels/recipe/fault-sides.ts';
import { releaseChange } from '#kernels/recipe/release-change.ts';
import { gradeChanges } from '#kernels/recipe/release-grades.ts';
import { releaseDifferences } from '#kernels/recipe/release-pieces.ts';
import { joinShortRuns } from '#kernels/recipe/run-length.ts';
import { codesOf, halves, metresOf, testHostileInputs } from '#tests/support/hostile-inputs.ts';

const intervalsOf = (fromM: Float64Array) =>
  Array.from(fromM.toSorted(), (top, i) => ({
    hole: 'DH1',
    fromM: top,
    toM: top + 0.01,
    code: 'AB'.charAt(i % 2),
  }));
const above = { kind: 'between', column: 'grade', min: 3, max: null } as const;

testHostileInputs([
  [
    'assignDomains',
    (lengths) =>
      assignDomains(codesOf(lengths, 2).codes, [{ groupLabels: [1], code: 'A' }], lengths),
  ],
  ['codeLines', (fromM) => codeLines(intervalsOf(fromM))],
  [
    'evaluateCondition',
    (grade) => evaluateCondition(above, new Map([['grade', grade]]), grade.length),
  ],
  [
    'evaluateRecipe',
    (grade, lengths) =>
      evaluateRecipe(
        [{ code: 'A', priority: 1, when: above }],
        [],
        new Map([['grade', grade]]),
        lengths,
      ),
  ],
  ['metresByCode', (lengths) => metresByCode(codesOf(lengths, 2), lengths)],
  ['faultBlocks', (first, second) => faultBlocks([first, second])],
  [
    'distancesToFault',
    (x, y) =>
      distancesToFault(Float64Array.from(Array.from(x, (east, i) => [east, y[i]!, 0]).flat()), {
        name: 'F',
        x: 0,
        y: 0,
        z: 0,
        dip: 60,
        dipDirection: 90,
      }),
    'missing',
  ],
  [
    'distancesToFault, plane',
    (v) =>
      Array.from(v, (x) =>
        distancesToFault(Float64Array.of(1, 2, 3), {
          ...{ name: 'F', x, y: 0, z: 0, dip: 10 * x, dipDirection: 40 * x },
        }),
      ),
  ],
  ['faultCrossing', (a, b) => Array.from(a, (from, i) => faultCrossing(from - 3, b[i]! - 3))],
  ['sidesOfFault', (distances) => sidesOfFault(distances)],
  ['releaseChange', (before, after) => releaseChange(intervalsOf(before), intervalsOf(after))],
  [
    'gradeChanges',
    (grades, lengths) => gradeChanges(codesOf(grades, 2), codesOf(grades, 3), grades, lengths),
  ],
  [
    'releaseDifferences',
    (before, after) => releaseDifferences(intervalsOf(before), intervalsOf(after)),
  ],
  [
    'joinShortRuns',
    (fromM) =>
      joinShortRuns(
        {
          holeStarts: Int32Array.of(0, fromM.length),
          fromM: fromM.toSorted(),
          toM: fromM.toSorted().map((top) => top + 0.001),
        },
        codesOf(fromM, 3),
      ),
  ],
  [
    'joinShortRuns, rule',
    (v) =>
      Array.from(v, (minLengthM) =>
        joinShortRuns({ holeStarts: halves(v), ...metresOf(v) }, codesOf(v, 3), { minLengthM }),
      ),
  ],
]);
