import { render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { expect, it } from 'vitest';
import { VERDICT_POWER } from '#kernels/populations/verdict-power.ts';
import { VerdictHelp } from '#src/features/populations/components/verdict-help.tsx';

it('shows on demand how often the verdict is right, truth by truth', async () => {
  render(<VerdictHelp />);
  await userEvent.click(screen.getByText('How often it is right'));
  const table = within(screen.getByRole('region', { name: 'How often the verdict is right' })).getByRole('table');
  const rows = within(table).getAllByRole('row');
  expect(rows).toHaveLength(VERDICT_POWER.length + 1);
  expect(within(table).getByRole('row', { name: /^one lognormal 0 \(0\)/ })).toBeInTheDocument();
});
