import { ChevronsUpDown } from 'lucide-react';
import type { Grouping } from '#contract/groupings.ts';
import { Button } from '#src/components/ui/button.tsx';
import { Menu } from '#src/components/ui/menu.tsx';
import { countOf, formatFixed } from '#src/lib/format.ts';

interface Props {
  groupings: readonly Grouping[];
  chosen: Grouping;
  onChoose: (id: number) => void;
}

/** Which of the runs is on the page. */
export function GroupingMenu({ groupings, chosen, onChoose }: Props) {
  return (
    <Menu
      trigger={
        <Button icon={ChevronsUpDown} aria-label={`Grouping: ${chosen.name}. Choose another`}>
          {chosen.name}
        </Button>
      }
      groups={[
        {
          heading: 'Groupings, newest first',
          items: groupings.map((grouping) => ({ label: grouping.name, hint: groupingHint(grouping), isChosen: grouping.id === chosen.id, run: () => onChoose(grouping.id) })),
        },
      ]}
    />
  );
}

export function groupingHint({ k, components, seed, snapshotNumber, silhouette, isActive, isStale }: Grouping): string {
  const parts = [`k = ${k}`, countOf(components, 'component'), `seed ${seed}`, `snapshot ${snapshotNumber}${isStale ? ', stale' : ''}`];
  if (silhouette !== null) parts.push(`silhouette ${formatFixed(silhouette, 2)}`);
  if (isActive) parts.push('domains stand on it');
  return parts.join(' · ');
}
