import { describe, expect, it } from 'vitest';
import { profilePart, type PartProfile } from '#kernels/compositions/part-profile.ts';
import { rowUse } from '#kernels/compositions/row-use.ts';
import {
  DEFAULT_SCREENING,
  screenParts,
  type PartToScreen,
} from '#kernels/compositions/screen-parts.ts';

function profile(changes: Partial<PartProfile> = {}): PartProfile {
  return {
    nRows: 1000,
    nMeasured: 1000,
    nBelow: 0,
    nAbove: 0,
    nMissing: 0,
    limits: [1],
    steppedShare: 0,
    ...changes,
  };
}

function decide(part: PartToScreen, limits = DEFAULT_SCREENING) {
  const [found] = screenParts(
    [part, { element: 'Al', profile: profile() }, { element: 'K', profile: profile() }],
    limits,
  );
  if (!found) throw new Error('no decision');
  return found;
}

describe('screenParts', () => {
  it.each([
    [0, 'keep', /every row/],
    [50, 'keep-with-imputation', /adequate/],
    [51, 'keep-with-imputation', /group of its own/],
    [300, 'keep-with-imputation', /30 % below detection/],
    [301, 'drop', /only if it separates units/],
    [500, 'drop', /only if it separates units/],
    [501, 'drop', /above or below its limit/],
  ] as const)('%i of 1000 below detection: %s', (nBelow, decision, reason) => {
    const found = decide({ element: 'As', profile: profile({ nBelow, nMeasured: 1000 - nBelow }) });
    expect(found.decision).toBe(decision);
    expect(found.reason).toMatch(reason);
  });

  it('counts the share below detection over analysed rows only', () => {
    const found = decide({
      element: 'As',
      profile: profile({ nMissing: 100, nBelow: 270, nMeasured: 630 }),
    });
    expect(found.decision).toBe('keep-with-imputation');
  });

  it.each<[Partial<PartToScreen>, RegExp]>([
    [{ profile: profile({ nMissing: 101 }) }, /rows miss it/],
    [{ profile: profile({ nMissing: 1000, nMeasured: 0 }) }, /no row/],
    [{ cvOfDuplicates: 0.31 }, /duplicates/],
    [{ element: 'Hg', digestion: 'four-acid' }, /four-acid/],
    [{ element: 'Au' }, /gold/],
    [{ element: 'LOI' }, /loss on ignition/],
  ])('drops %j', (changes, reason) => {
    const found = decide({ element: 'As', profile: profile(), ...changes });
    expect(found.decision).toBe('drop');
    expect(found.reason).toMatch(reason);
  });

  it('keeps a volatile element that another digestion measured', () => {
    expect(decide({ element: 'Hg', digestion: 'total', profile: profile() }).decision).toBe('keep');
  });

  it('names rounding steps, changing limits, values above the limit, and hard minerals', () => {
    const { decision, cautions } = decide({
      element: 'Zr',
      digestion: 'four-acid',
      profile: profile({ steppedShare: 0.21, limits: [1, 2, 3], nAbove: 15 }),
    });
    expect(decision).toBe('keep');
    expect(cautions).toHaveLength(4);
    expect(cautions[2]).toBe('1.5 % above the upper limit, taken at the limit');
    expect(decide({ element: 'Cu', profile: profile({ limits: [1, 2.9] }) }).cautions).toEqual([]);
  });

  it('follows edited steps', () => {
    const part = { element: 'As', profile: profile({ nBelow: 400, nMeasured: 600 }) };
    expect(decide(part, { ...DEFAULT_SCREENING, modelReplacement: 0.45 }).decision).toBe(
      'keep-with-imputation',
    );
  });

  it('refuses fewer than three analytes', () => {
    expect(() => screenParts([{ element: 'Cu', profile: profile() }])).toThrow(
      expect.objectContaining({ code: 'too-few-parts' }),
    );
  });
});

describe('profilePart', () => {
  it('counts states, limits and the four commonest values', () => {
    const values = Float64Array.of(1, 1, 2, 2, 2, 3, 4, 5, 0.5, 0.1, 50, NaN, NaN);
    const states = Uint8Array.of(0, 0, 0, 0, 0, 0, 0, 0, 1, 1, 2, 3, 4);
    expect(profilePart(values, states)).toEqual({
      nRows: 13,
      nMeasured: 8,
      nBelow: 2,
      nAbove: 1,
      nMissing: 2,
      limits: [0.1, 0.5],
      steppedShare: 7 / 8,
    });
    expect(profilePart(new Float64Array(0), new Uint8Array(0)).steppedShare).toBe(0);
  });

  it('refuses states it does not know', () => {
    expect(() => profilePart(Float64Array.of(1), Uint8Array.of(5))).toThrow(
      expect.objectContaining({ code: 'bad-parameter' }),
    );
    expect(() => profilePart(Float64Array.of(1), new Uint8Array(0))).toThrow(
      expect.objectContaining({ code: 'shape' }),
    );
  });
});

describe('rowUse', () => {
  it('leaves out rows missing a part and only scores rows mostly below detection', () => {
    const states = [
      Uint8Array.of(0, 1, 3, 1),
      Uint8Array.of(0, 1, 0, 0),
      Uint8Array.of(2, 0, 0, 0),
      Uint8Array.of(0, 0, 4, 0),
    ];
    expect(rowUse(states)).toEqual({
      use: Uint8Array.of(1, 2, 0, 1),
      nFit: 2,
      nScoredOnly: 1,
      nLeftOut: 1,
    });
    expect([...rowUse(states, 0.5).use]).toEqual([1, 1, 0, 1]);
  });

  it('takes exactly 30 % as still fit', () => {
    const states = Array.from({ length: 10 }, (_, part) => Uint8Array.of(part < 3 ? 1 : 0));
    expect(rowUse(states).nFit).toBe(1);
  });

  it.each([
    ['too-few-parts', [], 0.3],
    ['shape', [new Uint8Array(1), new Uint8Array(2)], 0.3],
    ['bad-parameter', [new Uint8Array(1)], 1.5],
  ] as const)('refuses with %s', (code, states, share) => {
    expect(() => rowUse(states, share)).toThrow(expect.objectContaining({ code }));
  });
});
