import { fireEvent, render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import type { DepthWindow } from '#src/components/charts/depth-window.ts';
import { CoreTray } from '#src/components/tray/core-tray.tsx';
import type { CoreTrayProps } from '#src/components/tray/core-tray.tsx';
import type { TrayHole } from '#src/components/tray/tray-types.ts';

// ten intervals of 10 m; the box is 1,180 px wide without layout: 132 of labels, 34 of end, 1,014 of core
const hole: TrayHole = {
  name: 'TFD-011',
  lengthM: 100,
  rock: [{ fromM: 0, toM: 60, code: 'AND' }, { fromM: 60, toM: 100, code: 'MSX' }],
  structures: [{ depthM: 33, alphaDeg: 40, sure: true }],
  intervals: Array.from({ length: 10 }, (_value, i) => ({
    row: 500 + i,
    fromM: i * 10,
    toM: i * 10 + 10,
    groupSlot: i < 6 ? 1 : 6,
    membership: 0.8,
    grade: i === 3 ? null : i / 10,
    domain: i < 6 ? { code: '9000', slot: null } : { code: '1200', slot: 6 },
    isHost: i < 6,
  })),
};

const base: CoreTrayProps = {
  holes: [hole],
  holeNames: ['TFD-011', 'TFD-028', 'TFD-030'],
  rockKey: [{ code: 'AND', pattern: 'vees', label: 'andesite' }, { code: 'MSX', pattern: 'level', label: 'massive sulphide' }, { code: 'DOL', pattern: 'plus', label: 'dolerite' }],
  groups: [{ label: 'Andesite', slot: 1 }, { label: 'Cu sulphide', slot: 6 }],
  gradeLabel: 'Cu %',
  window: null,
  onWindowChange: () => undefined,
};
beforeEach(() => {
  // jsdom has no layout to observe
  vi.stubGlobal('ResizeObserver', class { observe() {} unobserve() {} disconnect() {} });
  Element.prototype.scrollIntoView = () => undefined;
});

const trough = () => screen.getByRole('application', { name: /^Core of TFD-011/ });
const pixelOf = (depthM: number) => 132 + (depthM / 110) * 1014;

/** The tray with its hovered row and window kept, as the shell keeps them. */
function LiveTray(props: Partial<CoreTrayProps>) {
  const [window, setWindow] = useState<DepthWindow | null>(null);
  const [row, setRow] = useState<number | null>(null);
  return <CoreTray {...base} {...props} window={window} onWindowChange={setWindow} hoveredRow={row} onHover={setRow} />;
}

describe('the tray', () => {
  it('lists its holes and the rocks they hold, and a table of the intervals in view', () => {
    render(<CoreTray {...base} note="copper bars mark the selection" />);
    expect(screen.getByText('copper bars mark the selection')).toBeInTheDocument();
    expect(screen.getAllByText('massive sulphide')[0]).toBeVisible();
    expect(screen.queryByText('dolerite')).not.toBeInTheDocument();
    const table = screen.getByRole('table', { name: 'Intervals of TFD-011 in view' });
    expect(within(table).getAllByRole('row')).toHaveLength(11);
    expect(within(table).getByRole('row', { name: /^30\.0 – 40\.0.m/ })).toHaveTextContent('Cu % – (no assay)');
    expect(within(table).getByRole('row', { name: /^60\.0 – 70\.0.m/ })).toHaveTextContent(/massive sulphideCu sulphide, membership 0\.80?Cu % 0\.6(00)?1200$/);
  });

  it('takes the intervals a drag touches; Shift adds, Alt takes away', () => {
    const onSelect = vi.fn();
    render(<CoreTray {...base} onSelect={onSelect} />);
    const drag = (fromM: number, toM: number, keys = {}) => {
      fireEvent.pointerDown(trough(), { button: 0, clientX: pixelOf(fromM) });
      fireEvent.pointerMove(trough(), { clientX: pixelOf(toM) });
      fireEvent.pointerUp(trough(), { clientX: pixelOf(toM), ...keys });
    };
    drag(12, 35);
    expect(onSelect).toHaveBeenLastCalledWith([501, 502, 503], 'replace');
    drag(55, 45, { shiftKey: true });
    expect(onSelect).toHaveBeenLastCalledWith([504, 505], 'add');
    drag(5, 5, { altKey: true });
    expect(onSelect).toHaveBeenLastCalledWith([500], 'remove');
  });

  it('steps by arrows, extends with Shift, takes by Space and opens the menu by Enter', async () => {
    const onSelect = vi.fn();
    const onOpenMenu = vi.fn();
    render(<LiveTray onSelect={onSelect} onOpenMenu={onOpenMenu} />);
    trough().focus();
    await userEvent.keyboard('{ArrowRight}{ArrowRight}');
    expect(screen.getByRole('status')).toHaveTextContent(/^TFD-011, 10\.0 – 20\.0.m, andesite, Andesite, membership 0\.80?, Cu % 0\.1(00)?, 9000, host$/);
    await userEvent.keyboard('{Shift>}{ArrowRight}{ArrowRight}{/Shift}');
    expect(onSelect).toHaveBeenLastCalledWith([501, 502, 503], 'replace');
    await userEvent.keyboard(' ');
    expect(onSelect).toHaveBeenLastCalledWith([503], 'replace');
    await userEvent.keyboard('{Enter}');
    expect(onOpenMenu).toHaveBeenCalledWith(503, { x: expect.closeTo(pixelOf(35), 1), y: 0 });
    await userEvent.keyboard('{Escape}');
    expect(onSelect).toHaveBeenLastCalledWith([], 'replace');
  });

  it('zooms by keys about the interval in hand, by the wheel with Ctrl, and fits by a double click', async () => {
    render(<LiveTray />);
    const shown = () => screen.getByRole('button', { name: /^Depth window/ }).textContent;
    expect(shown()).toMatch(/0 – 110/);
    trough().focus();
    await userEvent.keyboard('{End}+');
    expect(shown()).toMatch(/31\.7 – 105/);
    fireEvent.doubleClick(trough());
    expect(shown()).toMatch(/0 – 110/);
    fireEvent.wheel(trough(), { deltaY: -300, ctrlKey: true, clientX: 132 });
    expect(shown()).toMatch(/0 – 55/);
  });

  it('takes a depth window that is typed, and says why it cannot', async () => {
    render(<LiveTray />);
    await userEvent.click(screen.getByRole('button', { name: /^Depth window/ }));
    const from = screen.getByLabelText('From, m');
    await userEvent.clear(from);
    await userEvent.type(from, '109');
    await userEvent.click(screen.getByRole('button', { name: 'Show' }));
    expect(screen.getByRole('alert')).toHaveTextContent('Expected at least 2 m of core, found 109 to 110 m.');
    await userEvent.clear(from);
    await userEvent.type(from, '60{Enter}');
    expect(screen.getByRole('button', { name: /^Depth window/, hidden: true }).textContent).toMatch(/60.* – 110/);
  });

  it('adds a hole by name and takes one out', async () => {
    const onAddHole = vi.fn();
    const onRemoveHole = vi.fn();
    render(<CoreTray {...base} onAddHole={onAddHole} onRemoveHole={onRemoveHole} />);
    await userEvent.click(screen.getByRole('button', { name: 'Add a hole to the tray' }));
    await userEvent.type(screen.getByRole('combobox'), '30');
    await userEvent.click(screen.getByRole('option', { name: 'TFD-030' }));
    expect(onAddHole).toHaveBeenCalledWith('TFD-030');
    await userEvent.click(screen.getByRole('button', { name: 'Take TFD-011 out of the tray' }));
    expect(onRemoveHole).toHaveBeenCalledWith('TFD-011');
  });

  it('draws only the tracks wanted, and keeps the last', async () => {
    const onTracks = vi.fn();
    render(<CoreTray {...base} tracks={new Set(['rock'])} onTracks={onTracks} />);
    expect(within(trough()).queryByText('domain')).not.toBeInTheDocument();
    await userEvent.click(screen.getByRole('button', { name: 'Tracks' }));
    await userEvent.click(screen.getByRole('menuitemcheckbox', { name: 'rock' }));
    expect(onTracks).not.toHaveBeenCalled();
    await userEvent.click(screen.getByRole('menuitemcheckbox', { name: 'Cu %' }));
    expect(onTracks).toHaveBeenCalledWith(new Set(['rock', 'grade']));
  });

  it('is resized by arrow keys as a separator with a value', async () => {
    const onHeight = vi.fn();
    render(<CoreTray {...base} height={212} onHeight={onHeight} />);
    const grip = screen.getByRole('separator', { name: 'Height of the tray' });
    expect(grip).toHaveAttribute('aria-valuenow', '212');
    grip.focus();
    await userEvent.keyboard('{ArrowUp}');
    expect(onHeight).toHaveBeenLastCalledWith(228);
    await userEvent.keyboard('{Home}');
    expect(onHeight).toHaveBeenLastCalledWith(120);
  });

  it('when closed still says what is selected', async () => {
    const onOpen = vi.fn();
    render(<CoreTray {...base} isOpen={false} onOpen={onOpen} summary="72 intervals in 23 holes" />);
    expect(screen.getByText('72 intervals in 23 holes')).toBeInTheDocument();
    expect(screen.queryByRole('application')).not.toBeInTheDocument();
    await userEvent.click(screen.getByRole('button', { name: 'Open the tray' }));
    expect(onOpen).toHaveBeenCalledWith(true);
  });

  it('when empty says how to fill it', () => {
    render(<CoreTray {...base} holes={[]} />);
    expect(screen.getByText('Pick a hole, or take points in any plot, and its core is laid here.')).toBeInTheDocument();
  });
});
