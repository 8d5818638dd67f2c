import { fireEvent, render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import { Scatter } from '#src/components/charts/scatter.tsx';
import type { ScatterProps } from '#src/components/charts/use-scatter.ts';

const base: ScatterProps = {
  title: 'Components',
  description: 'Two groups stand apart.',
  table: { caption: 'Means', columns: ['Group', 'PC1'], rows: [['Dyke', -2], ['Sulphide', 3]] },
  height: 400,
  x: Float64Array.of(0, 5, 10, NaN),
  y: Float64Array.of(0, 5, 10, 1),
  xDomain: [0, 10],
  yDomain: [0, 10],
  category: Float64Array.of(0, 0, 1, 1),
  categories: [{ label: 'Sulphide', slot: 6 }, { label: 'Dyke', slot: 2 }],
  xLabel: 'PC1, 76 %',
  yLabel: 'PC2, 8 %',
};

beforeEach(() => {
  vi.spyOn(HTMLCanvasElement.prototype, 'getContext').mockReturnValue(null); // jsdom has no canvas
});

describe('a scatter', () => {
  it('has a name, a sentence and its data for those who cannot see it', () => {
    render(<Scatter {...base} />);
    expect(screen.getByRole('img', { name: 'Components' })).toHaveAccessibleDescription('Two groups stand apart.');
    expect(within(screen.getByRole('table', { name: 'Means' })).getAllByRole('row')).toHaveLength(3);
    expect(screen.getByText('PC1, 76 %')).toBeInTheDocument();
  });

  it('shows its legend in slot order; a chip hides and shows, with Shift it takes the points', async () => {
    const onSelect = vi.fn();
    const onHidden = vi.fn();
    render(<Scatter {...base} onSelect={onSelect} onHidden={onHidden} />);
    const chips = screen.getAllByRole('button');
    expect(chips.map((chip) => chip.textContent)).toEqual(['Dyke', 'Sulphide']);
    await userEvent.click(screen.getByRole('button', { name: 'Dyke' }));
    expect(onHidden).toHaveBeenLastCalledWith(new Set([1]));
    expect(screen.getByRole('button', { name: 'Dyke' })).toHaveAttribute('aria-pressed', 'false');
    fireEvent.click(screen.getByRole('button', { name: 'Sulphide' }), { shiftKey: true });
    expect(onSelect).toHaveBeenLastCalledWith([0, 1], { by: 'legend', mode: 'replace' });
  });

  it('takes points by typed limits, and says what is no number', async () => {
    const onSelect = vi.fn();
    render(<Scatter {...base} tool="rule" onSelect={onSelect} />);
    await userEvent.click(screen.getByRole('button', { name: 'Take points' }));
    expect(screen.getByRole('alert')).toHaveTextContent('Write at least one limit, or choose a group.');
    expect(onSelect).not.toHaveBeenCalled();
    await userEvent.type(screen.getByLabelText('PC1 from'), 'five');
    await userEvent.click(screen.getByRole('button', { name: 'Take points' }));
    expect(screen.getByRole('alert')).toHaveTextContent('Expected a number for each limit, or nothing; found “five”.');
    await userEvent.clear(screen.getByLabelText('PC1 from'));
    await userEvent.type(screen.getByLabelText('PC1 from'), '5');
    await userEvent.click(screen.getByRole('button', { name: 'Take points' }));
    expect(onSelect).toHaveBeenLastCalledWith([1, 2], { by: 'rule', mode: 'replace' });
    expect(screen.queryByRole('alert')).not.toBeInTheDocument();
  });

  it('takes the points inside a dragged box, adds with Shift, and clears by Escape', () => {
    const onSelect = vi.fn();
    render(<Scatter {...base} tool="box" onSelect={onSelect} />);
    const plot = screen.getByRole('application');
    fireEvent.pointerDown(plot, { button: 0, clientX: 200, clientY: 100 });
    fireEvent.pointerMove(plot, { clientX: 100, clientY: 200 });
    fireEvent.pointerUp(plot, { clientX: -20, clientY: 420 });
    expect(onSelect).toHaveBeenLastCalledWith([0], { by: 'box', mode: 'replace' });
    fireEvent.pointerDown(plot, { button: 0, clientX: -20, clientY: -20 });
    fireEvent.pointerMove(plot, { clientX: 100, clientY: 200 });
    fireEvent.pointerUp(plot, { clientX: 900, clientY: 420, shiftKey: true });
    expect(onSelect).toHaveBeenLastCalledWith([0, 1, 2], { by: 'box', mode: 'add' });
    fireEvent.keyDown(plot, { key: 'Escape' });
    expect(onSelect).toHaveBeenLastCalledWith([], { by: 'clear', mode: 'replace' });
  });

  it('lights the nearest point and speaks of it', () => {
    const onHover = vi.fn();
    render(<Scatter {...base} onHover={onHover} tooltip={(row) => `row ${row}`} />);
    const plot = screen.getByRole('application');
    fireEvent.pointerMove(plot, { clientX: 3, clientY: 348 });
    expect(onHover).toHaveBeenLastCalledWith(0);
    expect(screen.getByRole('tooltip')).toHaveTextContent('row 0');
    fireEvent.pointerLeave(plot);
    expect(onHover).toHaveBeenLastCalledWith(null);
    expect(screen.queryByRole('tooltip')).not.toBeInTheDocument();
  });

  it('zooms by keys: the ticks come closer and 0 brings them back', () => {
    render(<Scatter {...base} />);
    const plot = screen.getByRole('application');
    const ticks = () => screen.getAllByText(/^\d+(\.\d)?$/).map((tick) => tick.textContent);
    const before = ticks();
    fireEvent.keyDown(plot, { key: '+' });
    fireEvent.keyDown(plot, { key: '+' });
    expect(ticks()).not.toEqual(before);
    fireEvent.keyDown(plot, { key: '0' });
    expect(ticks()).toEqual(before);
  });

  it('says so when no row has both values', () => {
    render(<Scatter {...base} x={Float64Array.of(NaN)} y={Float64Array.of(1)} category={[0]} />);
    expect(screen.getByText('No row has both values.')).toBeInTheDocument();
  });
});
