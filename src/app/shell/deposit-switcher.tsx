import { useQuery } from '@tanstack/react-query';
import { ChevronsUpDown } from 'lucide-react';
import { useNavigate } from 'react-router-dom';
import { Icon } from '#src/components/ui/icon.tsx';
import { Menu } from '#src/components/ui/menu.tsx';
import { depositsQuery } from '#src/lib/deposit-queries.ts';
import { formatMetres } from '#src/lib/format.ts';
import { useDeposit } from '#src/lib/use-deposit.ts';

/** The deposit in hand, and the way to another. */
export function DepositSwitcher() {
  const deposit = useDeposit();
  const navigate = useNavigate();
  const { data: deposits = [] } = useQuery(depositsQuery());
  const about = [
    deposit.payAnalytes.map(({ analyte }) => analyte).join(' '),
    leadsOf(deposit.leads),
  ]
    .filter(Boolean)
    .join(' · ');
  const go = (to: string) => () => void navigate(to);
  return (
    <Menu
      align="start"
      groups={[
        {
          heading: 'Deposits',
          items: deposits.map(({ id, name, metres, isDemo }) => ({
            label: name,
            hint: `${metres > 0 ? formatMetres(metres) : 'nothing loaded yet'}${isDemo ? ' · demonstration' : ''}`,
            isChosen: id === deposit.id,
            run: go(`/deposits/${id}`),
          })),
        },
        {
          items: [
            { label: 'People and tokens', run: go(`/deposits/${deposit.id}/members`) },
            { label: 'Settings', run: go(`/deposits/${deposit.id}/settings`) },
          ],
        },
        {
          items: [
            { label: 'All deposits', run: go('/deposits') },
            { label: 'New deposit', run: go('/deposits/new') },
          ],
        },
      ]}
      trigger={
        <button
          type="button"
          className="flex max-w-full min-w-0 items-center gap-1.5 rounded-2 border-0 bg-transparent px-1.5 py-0.5 hover:bg-trough max-md:min-h-9"
        >
          <span className="sr-only">Deposit: </span>
          <span className="truncate text-[0.9375rem] font-semibold">{deposit.name}</span>
          {about && <span className="truncate text-small text-ink-3 max-lg:hidden">{about}</span>}
          <Icon icon={ChevronsUpDown} size={14} className="text-ink-2" />
        </button>
      }
    />
  );
}

const leadsOf = (leads: readonly { name: string }[]): string =>
  leads.length === 0
    ? ''
    : `${leads.length === 1 ? 'lead' : 'leads'}: ${leads.map(({ name }) => name).join(', ')}`;
