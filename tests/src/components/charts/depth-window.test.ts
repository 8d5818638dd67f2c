import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { clampWindow, fitWindow, labelStep, panWindow, readWindow, rulerMarks, showInWindow, zoomWindow } from '#src/components/charts/depth-window.ts';

const FIT = [0, 360] as const;

describe('the depth window', () => {
  it('fits the longest hole, on a round number', () => {
    expect(fitWindow([{ lengthM: 354 }, { lengthM: 323.5 }])).toEqual([0, 360]);
    expect(fitWindow([])).toEqual([0, 100]);
  });
  it('counts from a contact where holes hang from one', () => {
    const [from, to] = fitWindow([{ lengthM: 300, originM: 120 }, { lengthM: 250, originM: 180 }]);
    expect(from).toBe(-180);
    expect(to).toBe(190);
  });
  it('zooms about a depth that keeps its place', () => {
    const [from, to] = zoomWindow(FIT, 2, 90, FIT);
    expect(to - from).toBe(180);
    expect((90 - from) / (to - from)).toBeCloseTo(0.25, 12);
  });
  it('never leaves the fit and never closes', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 350, noNaN: true }), fc.double({ min: 0.01, max: 100, noNaN: true }), fc.double({ min: -500, max: 500, noNaN: true }), (about, factor, by) => {
        const [from, to] = panWindow(zoomWindow(FIT, factor, about, FIT), by, FIT);
        expect(from).toBeGreaterThanOrEqual(0);
        expect(to).toBeLessThanOrEqual(360 + 1e-9);
        expect(to - from).toBeGreaterThanOrEqual(2 - 1e-9);
      }),
    );
    expect(clampWindow([-20, 30], FIT)).toEqual([0, 50]);
  });
  it('moves only as far as a stretch needs to show', () => {
    expect(showInWindow([100, 200], 120, 130, FIT)).toEqual([100, 200]);
    const [from, to] = showInWindow([100, 200], 210, 212, FIT);
    expect([from, to]).toEqual([116, 216]);
  });
});

describe('the ruler', () => {
  it('has labels each 50 m and ticks each 10 m on a hole of 360 m in a laptop window', () => {
    expect(labelStep(FIT, 1020)).toBe(50);
    const marks = rulerMarks(FIT, 1020);
    expect(marks.filter(({ label }) => label !== null).map(({ depthM }) => depthM)).toEqual([0, 50, 100, 150, 200, 250, 300, 350]);
    expect(marks).toHaveLength(37);
  });
  it('is finer when zoomed in and writes tenths without dust', () => {
    expect(rulerMarks([10, 13], 600).filter(({ label }) => label !== null).map(({ label }) => label)).toEqual(['10\u00a0m', '10.5\u00a0m', '11\u00a0m', '11.5\u00a0m', '12\u00a0m', '12.5\u00a0m', '13\u00a0m']);
  });
});

describe('typed depths', () => {
  it('make a window within the core', () => {
    expect(readWindow('190', '262,5', FIT)).toEqual({ window: [190, 262.5] });
    expect(readWindow('300', '500', FIT)).toEqual({ window: [160, 360] });
  });
  it.each([
    ['', '20', 'Expected two depths in metres, found "" and "20".'],
    ['20', '10', 'Expected at least 2 m of core, found 20 to 10 m.'],
    ['400', '450', 'The core in the tray runs from 0 to 360 m.'],
  ])('%s to %s is refused with what was found', (from, to, problem) => {
    expect(readWindow(from, to, FIT)).toEqual({ problem });
  });
});
