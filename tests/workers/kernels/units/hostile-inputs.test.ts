import { toPpm } from '#kernels/units/assay-unit.ts';
import { chooseDetermination, GRADE_STATE } from '#kernels/units/determinations.ts';
import { ironOf } from '#kernels/units/iron-forms.ts';
import { elementFromOxide } from '#kernels/units/oxides.ts';
import { findRowProblems } from '#kernels/units/row-sanity.ts';
import { testHostileInputs } from '#tests/support/hostile-inputs.ts';

const asMeasured = (ppm: Float64Array, name: string) => ({
  name,
  ppm,
  state: new Uint8Array(ppm.length).fill(GRADE_STATE.measured),
});

testHostileInputs([
  ['elementFromOxide', (v) => Array.from(v, (x) => elementFromOxide('Al2O3', x)), 'missing'],
  ['toPpm', (v) => Array.from(v, (x) => toPpm(x, '%')), 'missing'],
  ['ironOf', (feo, fe2o3) => ironOf({ feo, fe2o3 }, 'separate'), 'missing'],
  [
    'findRowProblems',
    (v) =>
      findRowProblems(
        v.map((x) => 2e5 * x),
        ['Fe', 'S', 'Cu', 'Zn'],
      ),
  ],
  [
    'chooseDetermination',
    (first, second) => chooseDetermination([asMeasured(first, 'a'), asMeasured(second, 'b')]),
    'missing',
  ],
]);
