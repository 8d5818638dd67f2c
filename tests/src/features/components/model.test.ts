import { expect, it } from 'vitest';
import { biplotRays, knownComponent, shortReading } from '#src/components/ground/component-words.ts';
import { codeColours, groupingOn } from '#src/features/components/colour.ts';
import { componentsFinding, largeFrom, loadingsOf, sixths } from '#src/features/components/model.ts';
import { runInHand } from '#src/features/components/use-run.ts';
import { grouping, run } from '../analysis-fixtures.ts';

it('says what the kept components carry and oppose', () => {
  expect(componentsFinding(run)).toBe('One component carries 75\u00a0% of the variance. PC1 sets Cu against Na.');
  expect(componentsFinding({ ...run, suggested: 2 })).toBe('Two components carry 100\u00a0% of the variance. PC1 sets Cu against Na.');
  expect(shortReading(run, 2)).toBe('Cu and Na against Zn');
});

it('orders loadings by size, and takes the longest rays of two components', () => {
  expect(loadingsOf(run, 1).map(({ element }) => element)).toEqual(['Na', 'Cu', 'Zn']);
  expect(largeFrom(run, 1)).toBe(0.4);
  expect(biplotRays(run, 1, 2)[0]).toEqual({ label: 'Na', x: -0.8, y: 0.4 });
});

it('parts scores into six classes of equal number', () => {
  const scores = Float64Array.from({ length: 13 }, (_value, index) => (index === 12 ? NaN : 11 - index));
  expect(sixths(scores)).toEqual([1, 3, 5, 7, 9]);
  expect(sixths(Float64Array.of(NaN))).toEqual([]);
});

it('gives slots to the codes with most metres and leaves rare ones plain', () => {
  const dictionary = Array.from({ length: 18 }, (_value, index) => `R${index}`);
  const codes = Float64Array.from(dictionary, (_word, index) => index);
  const weight = Float64Array.from(dictionary, (_word, index) => index + 1);
  const colours = codeColours(codes, dictionary, weight, 'lithology');
  expect(colours.categories[0]).toEqual({ label: 'R17', slot: 1 });
  expect(colours.categories).toHaveLength(16);
  expect(colours.category?.[17]).toBe(0);
  expect(colours.category?.[0]).toBeNaN();
  expect(colours.note).toBe('16 of 18 lithology codes coloured');
});

it('takes only a component that is stored, a run of the suite asked for, a grouping of the same rows', () => {
  expect(knownComponent('PC2', 2, 1)).toBe('PC2');
  expect(knownComponent('PC9', 2, 1)).toBe('PC1');
  expect(runInHand([run], { run: null, suite: 1 })).toBe(run);
  expect(runInHand([run], { run: null, suite: 7 })).toBeNull();
  expect(groupingOn([grouping], 11)).toBe(grouping);
  expect(groupingOn([grouping], 12)).toBeNull();
});
