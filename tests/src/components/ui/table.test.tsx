import { screen, within } from '@testing-library/react';
import { describe, expect, it, vi } from 'vitest';
import { tableCells, type Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { formatFixed } from '#src/lib/format.ts';
import { axeViolations } from '#tests/support/axe.ts';
import { renderPage } from '#tests/support/render-page.tsx';

interface Row {
  hole: string;
  cu: number | null;
}

const COLUMNS: Column<Row>[] = [
  { header: 'Hole', rowHeader: true, cell: ({ hole }) => hole },
  {
    header: 'Cu',
    unit: 'ppm',
    align: 'right',
    cell: ({ cu }) => (cu === null ? null : formatFixed(cu, 1)),
    value: ({ cu }) => cu,
  },
  { header: 'Do', isControl: true, cell: () => <button type="button">Do</button> },
];
const ROWS: Row[] = [
  { hole: 'TFD-10', cu: 9 },
  { hole: 'TFD-9', cu: null },
  { hole: 'TFD-2', cu: 1200 },
];

const shownHoles = () => screen.getAllByRole('rowheader').map(({ textContent }) => textContent);

describe('Table', () => {
  it('sorts by a header: there, back, and as it came; what is missing stays last', async () => {
    const { user } = renderPage(<Table caption="Grades" columns={COLUMNS} rows={ROWS} />);
    expect(shownHoles()).toEqual(['TFD-10', 'TFD-9', 'TFD-2']);
    const copper = screen.getByRole('button', { name: /Cu/ });
    await user.click(copper);
    expect(shownHoles()).toEqual(['TFD-2', 'TFD-10', 'TFD-9']);
    expect(screen.getByRole('columnheader', { name: /Cu/ })).toHaveAttribute(
      'aria-sort',
      'descending',
    );
    await user.click(copper);
    expect(shownHoles()).toEqual(['TFD-10', 'TFD-2', 'TFD-9']);
    await user.click(copper);
    expect(shownHoles()).toEqual(['TFD-10', 'TFD-9', 'TFD-2']);
  });

  it('orders numbers inside names as people do', async () => {
    const { user } = renderPage(<Table caption="Grades" columns={COLUMNS} rows={ROWS} />);
    await user.click(screen.getByRole('button', { name: 'Hole' }));
    expect(shownHoles()).toEqual(['TFD-2', 'TFD-9', 'TFD-10']);
  });

  it('writes a dash for what is missing', () => {
    renderPage(<Table caption="Grades" columns={COLUMNS} rows={ROWS} />);
    const row = screen.getByRole('row', { name: /TFD-9/ });
    expect(within(row).getByText('–')).toBeInTheDocument();
  });

  it('UX-05 moves by arrow keys and takes a row by Enter', async () => {
    const onPick = vi.fn();
    const { user } = renderPage(
      <Table
        caption="Grades"
        columns={COLUMNS}
        rows={ROWS}
        onPick={onPick}
        isPicked={({ hole }) => hole === 'TFD-9'}
      />,
    );
    await user.tab();
    await user.tab();
    await user.tab();
    expect(screen.getByRole('row', { name: /TFD-10/ })).toHaveFocus();
    await user.keyboard('{ArrowDown}');
    await vi.waitFor(() => expect(screen.getByRole('row', { name: /TFD-9/ })).toHaveFocus());
    await user.keyboard('{End}');
    await vi.waitFor(() => expect(screen.getByRole('row', { name: /TFD-2/ })).toHaveFocus());
    await user.keyboard('{Enter}');
    expect(onPick).toHaveBeenCalledExactlyOnceWith(ROWS[2]);
    expect(screen.getByRole('row', { name: /TFD-9/ })).toHaveAttribute('aria-selected', 'true');
  });

  it('UX-08 keeps only the rows in view of 100,000 in the page', () => {
    const many = Array.from({ length: 100_000 }, (_, index) => ({
      hole: `TFD-${index}`,
      cu: index,
    }));
    renderPage(<Table caption="Grades" columns={COLUMNS} rows={many} />);
    expect(screen.getAllByRole('row').length).toBeLessThan(80);
    expect(screen.getByRole('table')).toHaveAttribute('aria-rowcount', '100001');
  });

  it('shows what it was given when there are no rows', () => {
    renderPage(
      <Table caption="Grades" columns={COLUMNS} rows={[]} empty={<p>Nothing here yet.</p>} />,
    );
    expect(screen.getByText('Nothing here yet.')).toBeInTheDocument();
    expect(screen.queryByRole('table')).toBeNull();
  });

  it('has no accessibility violation', async () => {
    const { container } = renderPage(
      <Table caption="Grades" columns={COLUMNS} rows={ROWS} onPick={() => undefined} />,
    );
    expect(await axeViolations(container)).toEqual([]);
  });
});

it('files hold the numbers, the unit in the header, and no controls', () => {
  expect(tableCells(COLUMNS, ROWS)).toEqual({
    header: ['Hole', 'Cu (ppm)'],
    cells: [
      ['TFD-10', 9],
      ['TFD-9', null],
      ['TFD-2', 1200],
    ],
  });
});
