import { act, fireEvent, screen } from '@testing-library/react';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import { Facts, SelectionCard } from '#src/components/layout/selection-card.tsx';
import { CardPlace, SlotProvider, TrayPlace } from '#src/components/layout/slots.tsx';
import { TraySlot } from '#src/components/layout/tray-slot.tsx';
import { axeViolations } from '#tests/support/axe.ts';
import { renderPage } from '#tests/support/render-page.tsx';

const shell = (page: React.ReactNode) => (
  <SlotProvider>
    <main>{page}</main>
    <CardPlace className="card" />
    <TrayPlace className="tray" />
  </SlotProvider>
);

const tray = (
  <TraySlot header={<span>TFD-011</span>} closedSummary="72 intervals in 23 holes">
    {(height) => <p>{`core in ${height} px`}</p>}
  </TraySlot>
);

beforeEach(() => localStorage.clear());

describe('core tray', () => {
  it('is a separator with a value that the arrow keys move, kept for the person', () => {
    const { unmount } = renderPage(shell(tray));
    const grip = screen.getByRole('separator', { name: 'Tray height' });
    expect(grip).toHaveAttribute('aria-valuenow', '212');
    fireEvent.keyDown(grip, { key: 'ArrowUp' });
    expect(screen.getByRole('separator')).toHaveAttribute('aria-valuenow', '228');
    expect(screen.getByText('core in 193 px')).toBeInTheDocument();
    unmount();
    renderPage(shell(tray));
    expect(screen.getByRole('separator')).toHaveAttribute('aria-valuenow', '228');
  });

  it('stays within its bounds', () => {
    renderPage(shell(tray));
    for (let i = 0; i < 20; i++)
      fireEvent.keyDown(screen.getByRole('separator'), { key: 'ArrowDown' });
    expect(screen.getByRole('separator')).toHaveAttribute('aria-valuenow', '120');
  });

  it('closed, it says what is selected', async () => {
    const { user } = renderPage(shell(tray));
    expect(screen.queryByText('72 intervals in 23 holes')).toBeNull();
    await user.click(screen.getByRole('button', { name: 'Close the tray' }));
    expect(screen.getByText('72 intervals in 23 holes')).toBeInTheDocument();
    expect(screen.queryByRole('separator')).toBeNull();
    expect(screen.getByRole('button', { name: 'Open the tray' })).toHaveAttribute(
      'aria-expanded',
      'false',
    );
  });
});

describe('selection card', () => {
  const card = (onClear: () => void) => (
    <SelectionCard count={1277} unit="intervals" detail="72.0 m in 23 holes" onClear={onClear}>
      <Facts facts={[{ term: 'Copper', value: '1.39 %' }]} />
    </SelectionCard>
  );

  it('stands in the place of the shell and clears', async () => {
    const onClear = vi.fn();
    const { user, container } = renderPage(shell(card(onClear)));
    const place = container.querySelector('.card');
    expect(place).toHaveTextContent('1,277 intervals');
    expect(place).toHaveTextContent('Copper1.39 %');
    await user.click(screen.getByRole('button', { name: 'Clear the selection' }));
    expect(onClear).toHaveBeenCalledOnce();
  });

  it('leaves an empty place behind, and no violation with the tray beside it', async () => {
    const { container, router } = renderPage(
      shell(
        <>
          {card(() => undefined)}
          {tray}
        </>,
      ),
    );
    expect(await axeViolations(container)).toEqual([]);
    await act(async () => router.navigate('/elsewhere'));
    expect(container.querySelector('.card')).toBeNull();
  });
});
