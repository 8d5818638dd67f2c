import { describe, expect, it } from 'vitest';
import { guessColumns, guessKind } from '#workers/intake/guess-columns.ts';

describe('guessing columns', () => {
  it('is sure that y beside x is a coordinate, and asks where it stands alone', () => {
    const beside = guessColumns(['hole_id', 'x', 'y', 'z', 'length_m'], [['A', '1', '7700.5', '3', '90']], 'collar');
    expect(beside[2]).toMatchObject({ role: 'y', certainty: 'sure' });
    const alone = guessColumns(['hole_id', 'y'], [['A', '7700.5']], 'collar');
    expect(alone[1]).toMatchObject({ role: 'y', certainty: 'check' });
  });

  it('gives a role once and skips what the kind does not use', () => {
    const guess = guessColumns(['hole_id', 'bhid', 'depth_m', 'Cu_ppm'], [['A', 'B', '1', '2']], 'survey');
    expect(guess.map(({ role }) => role)).toEqual(['hole', 'skip', 'depth', 'skip']);
    expect(guess[3]?.reason).toBe('not used in a survey table');
  });

  it('takes the depth of a collar as its length, and the from of a structure as its depth', () => {
    const collar = guessColumns(['HOLEID', 'EAST', 'NORTH', 'RL', 'DEPTH'], [['A', '1', '2', '3', '90']], 'collar');
    expect(collar[4]).toMatchObject({ role: 'length', certainty: 'sure' });
    const both = guessColumns(['HOLEID', 'DEPTH', 'LENGTH'], [['A', '90', '90']], 'collar');
    expect(both.map(({ role }) => role)).toEqual(['hole', 'skip', 'length']);
    const structure = guessColumns(['Hole', 'From', 'Alpha'], [['A', '10', '45']], 'structure');
    expect(structure[1]).toMatchObject({ role: 'depth', certainty: 'check' });
  });

  it.each([
    ['collar.csv', ['hole_id', 'x', 'y', 'z', 'length_m'], 'collar'],
    ['a.csv', ['hole_id', 'from_m', 'to_m', 'Cu_ppm'], 'assay'],
    ['a.csv', ['hole_id', 'depth_m', 'azimuth', 'dip'], 'survey'],
    ['a.csv', ['hole_id', 'from_m', 'to_m', 'lithology'], 'lithology'],
    ['a.csv', ['hole_id', 'depth_m', 'alpha', 'beta'], 'structure'],
  ])('reads %s with %j as %s', (name, header, kind) => {
    expect(guessKind(header, name)).toBe(kind);
  });
});
