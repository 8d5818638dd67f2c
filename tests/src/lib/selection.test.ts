import { beforeEach, describe, expect, it, vi } from 'vitest';
import {
  clearSelection,
  currentSelection,
  enterFrame,
  hoverRow,
  hoveredRow,
  onHoverChange,
  onSelectionChange,
  selectionMask,
  takeRows,
} from '#src/lib/selection.ts';

beforeEach(() => clearSelection());

const rows = () => [...currentSelection().rows];

describe('selection', () => {
  it('takes, adds and removes rows, in ascending order', () => {
    takeRows([5, 3, 3], 'drawn by lasso');
    expect(rows()).toEqual([3, 5]);
    takeRows([9, 1], 'clicked', 'add');
    expect(rows()).toEqual([1, 3, 5, 9]);
    takeRows([3, 100], 'clicked', 'remove');
    expect(rows()).toEqual([1, 5, 9]);
    expect(currentSelection().source).toBe('clicked');
    expect(currentSelection().has(5)).toBe(true);
    expect(currentSelection().has(3)).toBe(false);
  });

  it('sorts numerically', () => {
    takeRows([10, 9, 100], 'x');
    expect(rows()).toEqual([9, 10, 100]);
  });

  it('is empty after the last row is removed', () => {
    takeRows([1], 'x');
    takeRows([1], 'x', 'remove');
    expect(rows()).toEqual([]);
    expect(currentSelection().source).toBe('');
  });

  it('tells followers once a change', () => {
    const listener = vi.fn();
    const stop = onSelectionChange(listener);
    takeRows([1, 2], 'x');
    clearSelection();
    clearSelection();
    stop();
    takeRows([1], 'x');
    expect(listener).toHaveBeenCalledTimes(2);
  });

  it('is dropped with the hover when another frame comes in hand', () => {
    enterFrame('frame 1');
    takeRows([1], 'x');
    hoverRow(7);
    enterFrame('frame 1');
    expect(rows()).toEqual([1]);
    enterFrame('frame 2');
    expect(rows()).toEqual([]);
    expect(hoveredRow()).toBeNull();
  });

  it('gives a mask that ignores rows beyond the table', () => {
    takeRows([0, 2, 50], 'x');
    expect([...selectionMask(currentSelection(), 4)]).toEqual([1, 0, 1, 0]);
  });
});

it('hover tells followers of each other row', () => {
  hoverRow(null);
  const listener = vi.fn();
  const stop = onHoverChange(listener);
  hoverRow(4);
  hoverRow(4);
  hoverRow(null);
  stop();
  expect(listener).toHaveBeenCalledTimes(2);
});
