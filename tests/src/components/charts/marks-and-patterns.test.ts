import { schemeBrBG, lab, hcl } from 'd3';
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { markPath, runFill, slotColours } from '#src/components/charts/category-marks.tsx';
import { assignPatterns, ROCK_PATTERNS, rockFill } from '#src/components/charts/rock-patterns.tsx';

describe('category marks', () => {
  it('repeat their outline hollow from slot 9 on', () => {
    expect(markPath(9, 3)).toBe(markPath(1, 3));
    expect(markPath(16, 3)).toBe(markPath(8, 3));
    expect([slotColours(8).hollow, slotColours(9).hollow]).toEqual([false, true]);
    expect(slotColours(11)).toMatchObject({ fill: 'var(--c3)', edge: 'var(--c3e)' });
  });
  it('are eight different outlines of about one size', () => {
    const outlines = new Set([1, 2, 3, 4, 5, 6, 7, 8].map((slot) => markPath(slot, 4)));
    expect(outlines.size).toBe(8);
  });
  it('hatch the runs of hollow slots', () => {
    expect(runFill(4, 'x')).toBe('var(--c4)');
    expect(runFill(12, 'x')).toBe('url(#x-slot-12)');
  });
  it.each([0, 17, 2.5])('refuse slot %f', (slot) => {
    expect(() => markPath(slot, 3)).toThrow(`expected a category slot from 1 to 16, found ${slot}`);
  });
});

describe('rock patterns', () => {
  it('give usual codes their usual mark, others the first that is free', () => {
    expect([...assignPatterns(['QZ1', 'AND', 'MSX'])]).toEqual([['AND', 'vees'], ['MSX', 'level'], ['QZ1', 'plus']]);
  });
  it('give no two codes of a list the same mark', () => {
    const codes = ['AND', 'ANDB', 'DOL', 'Q1', 'Q2', 'Q3', 'Q4', 'Q5', 'Q6', 'Q7', 'Q8', 'Q9', 'Q10'];
    const given = [...assignPatterns(codes).values()];
    expect(new Set(given).size).toBe(codes.length);
  });
  it('leave codes beyond the last mark without one, on plain ground', () => {
    const codes = Array.from({ length: ROCK_PATTERNS.length + 2 }, (_value, i) => `Z${i}`);
    const given = [...assignPatterns(codes).values()];
    expect(given.filter((pattern) => pattern === null)).toHaveLength(2);
    expect(rockFill(null, 'p')).toBe('var(--rock-ground)');
  });
});

describe('tokens', () => {
  const css = readFileSync('src/tokens.css', 'utf8');
  const token = (name: string) => new RegExp(`--${name}: (#[0-9a-f]+)`).exec(css)?.[1] ?? '';
  it('hold the outer steps of BrBG as ColorBrewer prints them (table of d3-scale-chromatic)', () => {
    const nine = schemeBrBG[9] ?? [];
    [0, 1, 2, 6, 7, 8].forEach((i) => expect(token(`d${i + 1}`)).toBe(nine[i]));
  });
  it('rise in lightness along the sequence', () => {
    const lightness = [1, 2, 3, 4, 5, 6].map((i) => lab(token(`s${i}`)).l);
    expect([...lightness].sort((a, b) => a - b)).toEqual(lightness);
  });
  it('give each slot an edge of its own hue', () => {
    for (let slot = 1; slot <= 8; slot++) {
      const [fill, edge] = [hcl(token(`c${slot}`)), hcl(token(`c${slot}e`))];
      if (slot === 2) continue; // grey has no hue
      expect(Math.abs(((fill.h - edge.h + 540) % 360) - 180)).toBeLessThan(35);
    }
  });
});
