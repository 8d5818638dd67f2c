import { acidScreen } from '#kernels/geomet/acid-screen.ts';
import { ALKALI_TRIANGLES, alkaliPosition } from '#kernels/geomet/alkali-position.ts';
import { carbonateProxy } from '#kernels/geomet/carbonate-proxy.ts';
import { concentrateGrade, ratioToMetal } from '#kernels/geomet/concentrate.ts';
import { deleteriousZones, markedMetres } from '#kernels/geomet/deleterious-elements.ts';
import { flagZones } from '#kernels/geomet/flag-zones.ts';
import { flaggedShares } from '#kernels/geomet/flagged-shares.ts';
import { immobilePairs, lnRatio } from '#kernels/geomet/immobile-pairs.ts';
import { leastSquares } from '#kernels/geomet/least-squares.ts';
import { massChange } from '#kernels/geomet/mass-change.ts';
import { molarRatios } from '#kernels/geomet/molar-ratios.ts';
import { nonNegativeLeastSquares } from '#kernels/geomet/non-negative-least-squares.ts';
import { normativeMinerals } from '#kernels/geomet/normative-minerals.ts';
import { normativeRange } from '#kernels/geomet/normative-range.ts';
import { penalty, shareOverOnset } from '#kernels/geomet/penalty.ts';
import { sulphideProxies } from '#kernels/geomet/sulphide-proxies.ts';
import { codesOf, halves, metresOf, testHostileInputs } from '#tests/support/hostile-inputs.ts';

const each = (of: (value: number) => unknown) => (values: Float64Array) =>
  Array.from(values, (value) => of(value));
const two = (of: (a: number, b: number) => unknown) => (a: Float64Array, b: Float64Array) =>
  Array.from(a, (value, i) => of(value, b[i]!));
const byHole = (column: Float64Array) => ({ holeStarts: halves(column), ...metresOf(column) });
const terms = { onsetPpm: 2, stepPpm: 1, chargePerStep: 3 };
const triangle = ALKALI_TRIANGLES.feldspathic ?? ['K-feldspar', 'muscovite', 'albite'];
const assaysOf = (iron: number, sulphur: number) => [
  { element: 'Fe', percent: iron, limitPercent: 0.01 },
  { element: 'S', percent: sulphur, limitPercent: 0.01 },
  { element: 'Cu', percent: 0.3, limitPercent: 0.001 },
];
const minerals = ['pyrite', 'chalcopyrite'];
const interleaved = (...columns: Float64Array[]) =>
  Float64Array.from(
    Array.from(columns[0] ?? [], (_, i) => columns.map((column) => column[i]!)).flat(),
  );
const isOver = ({ length }: Float64Array) => Uint8Array.from({ length }, (_, i) => i % 2);

testHostileInputs([
  [
    'acidScreen',
    (sulphur, anc) =>
      Array.from(sulphur, (sulphurPercent, i) =>
        acidScreen({ sulphurPercent, ancKgPerT: anc[i]!, nagPh: anc[i]! }),
      ),
  ],
  ['acidScreen, carbon', each((x) => acidScreen({ sulphurPercent: 6, carbonPercent: x }))],
  [
    'acidScreen, sulphate',
    each((sulphatePercent) => acidScreen({ sulphurPercent: 6, sulphatePercent, ancKgPerT: 9 })),
  ],
  ['alkaliPosition', two((x, y) => alkaliPosition({ naOverAl: x / 9, kOverAl: y / 9 }, triangle))],
  ['carbonateProxy', two((Ca, C) => carbonateProxy({ Ca, C, Mg: C, P: 0.1 }))],
  ['carbonateProxy, phosphorus', each((P) => carbonateProxy({ Ca: 5, P, C: null, Mg: null }))],
  [
    'concentrateGrade',
    two((headPpm, metalHeadPpm) =>
      concentrateGrade({
        ...{ headPpm, metalHeadPpm, metalConcentratePpm: 250_000, recovery: 0.5 },
        ...{ metalRecovery: 0.9, leastMetalHeadPpm: 0 },
      }),
    ),
  ],
  ['ratioToMetal', (element, metal) => ratioToMetal(element, metal, 0), 'missing'],
  [
    'deleteriousZones',
    (valuesPpm) =>
      deleteriousZones(byHole(valuesPpm), [{ analyte: 'As', valuesPpm, limitPpm: 3 }], {
        minLengthM: 1,
        maxDilutionM: 1,
      }),
  ],
  ['markedMetres', (lengths) => markedMetres(lengths, isOver(lengths))],
  [
    'flagZones',
    (valuesPpm) =>
      flagZones(byHole(valuesPpm), { valuesPpm }, { limitPpm: 3, minLengthM: 1, maxDilutionM: 1 }),
  ],
  ['flaggedShares', (lengths) => flaggedShares(codesOf(lengths, 2), lengths, isOver(lengths))],
  ['immobilePairs', (al, ti, zr) => immobilePairs(interleaved(al, ti, zr), ['Al', 'Ti', 'Zr'])],
  ['lnRatio', (first, second) => lnRatio(first, second), 'missing'],
  ['leastSquares', (x, y, rhs) => leastSquares(interleaved(x, y), rhs, 2, [0, 1])],
  ['nonNegativeLeastSquares', (x, y, rhs) => nonNegativeLeastSquares(interleaved(x, y), rhs, 2)],
  [
    'massChange',
    (zr, k) => {
      const elements = ['Zr', 'K'];
      const limitsPpm = [0.01, 0.01];
      return massChange({ elements, parts: interleaved(zr, k), limitsPpm }, interleaved(k, zr), [
        'Zr',
      ]);
    },
    'missing',
  ],
  ['molarRatios', two((Al, K) => molarRatios({ Al, K, Na: K, Ca: K }))],
  ['normativeMinerals', two((fe, s) => normativeMinerals(assaysOf(fe, s), minerals))],
  [
    'normativeRange',
    (errors) =>
      normativeRange(assaysOf(5, 5), minerals, Array.from(errors.slice(0, 3)), {
        seed: 1,
        draws: 20,
      }),
  ],
  ['penalty', each((gradePpm) => penalty(gradePpm, terms))],
  ['penalty, step', each((stepPpm) => penalty(5, { ...terms, stepPpm }))],
  ['shareOverOnset', (values, lengths, density) => shareOverOnset(values, lengths, 2, density)],
  ['sulphideProxies', two((S, Cu) => sulphideProxies({ S, Cu, Fe: 9, Zn: Cu, As: Cu, Ba: Cu }))],
  [
    'sulphideProxies, sulphate',
    each((sulphateSulphur) => sulphideProxies({ S: 9, Fe: 9 }, { sulphateSulphur })),
  ],
]);
