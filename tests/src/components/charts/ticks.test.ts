import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { TICK_PX } from '#src/components/charts/chart-styles.ts';
import { textWidth } from '#src/components/charts/text-width.ts';
import { axisTicks, linearTicks, logTicks, niceDomain, tickLabel } from '#src/components/charts/ticks.ts';

const labels = (ticks: { label: string }[]) => ticks.map(({ label }) => label);

describe('linear ticks', () => {
  it('are even, with the decimals of their step and a true minus', () => {
    expect(labels(linearTicks([-4.2, 4.9], { lengthPx: 300, vertical: true }))).toEqual(['−4', '−2', '0', '2', '4']);
    expect(labels(linearTicks([0.36, 1.02], { lengthPx: 120, vertical: true }))).toEqual(['0.4', '0.6', '0.8', '1.0']);
    expect(labels(linearTicks([0, 8200], { lengthPx: 400 }))).toContain('2,000');
  });

  it('are fewer where there is less room, and never more than seven', () => {
    fc.assert(
      fc.property(fc.double({ min: -1e6, max: 1e6, noNaN: true }), fc.double({ min: 1e-3, max: 1e6, noNaN: true }), fc.integer({ min: 30, max: 1200 }), (low, span, lengthPx) => {
        const ticks = linearTicks([low, low + span], { lengthPx });
        expect(ticks.length).toBeLessThanOrEqual(7);
        ticks.slice(1).forEach((tick, i) => {
          const before = ticks[i];
          const apart = ((tick.value - (before?.value ?? 0)) / span) * lengthPx;
          expect(apart).toBeGreaterThanOrEqual((textWidth(tick.label, TICK_PX) + textWidth(before?.label ?? '', TICK_PX)) / 2);
        });
      }),
    );
  });
});

describe('log ticks', () => {
  it('take 1-2-5 where they fit in seven, then 1-3, then decades', () => {
    expect(labels(logTicks([0.05, 3], { lengthPx: 400 }))).toEqual(['0.05', '0.1', '0.2', '0.5', '1', '2']);
    expect(labels(logTicks([0.009, 11], { lengthPx: 400, vertical: true }))).toEqual(['0.01', '0.03', '0.1', '0.3', '1', '3', '10']);
    expect(labels(logTicks([0.009, 11], { lengthPx: 90, vertical: true }))).toEqual(['0.01', '0.1', '1', '10']);
    expect(labels(logTicks([1e-6, 1e6], { lengthPx: 400, vertical: true }))).toHaveLength(7);
  });

  it('fall back to even ticks inside one decade, and give none for a domain that is not positive', () => {
    expect(labels(axisTicks('log', [3.1, 8.7], { lengthPx: 300 }))).toEqual(['4', '6', '8']);
    expect(logTicks([0, 10], { lengthPx: 300 })).toEqual([]);
  });
});

it('writes small and large numbers in full', () => {
  expect(tickLabel(0.00003)).toBe('0.00003');
  expect(tickLabel(20000)).toBe('20,000');
});

describe('a domain', () => {
  it('spans the finite values with a margin', () => {
    const [low, high] = niceDomain([3, NaN, 1, Infinity], 'linear', 0.1);
    expect(low).toBeCloseTo(0.8, 12);
    expect(high).toBeCloseTo(3.2, 12);
  });
  it('leaves out what has no logarithm', () => {
    expect(niceDomain([0, -3, 1, 100], 'log', 0)).toEqual([1, 100]);
  });
  it('has room about a single value, and exists without any', () => {
    expect(niceDomain([5, 5], 'linear')).toEqual([2.5, 7.5]);
    expect(niceDomain([], 'log')).toEqual([0.1, 10]);
  });
});
