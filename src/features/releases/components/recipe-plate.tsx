import type { CodeSet } from '#contract/codes.ts';
import { Facts } from '#src/components/layout/selection-card.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { formatHash } from '#src/lib/format.ts';

/** What the codes stand on: enough to make them again. */
export function RecipePlate({ set }: { set: CodeSet }) {
  return (
    <Plate title="Recipe" qualifier="frozen with the codes" caption="A group belongs to one domain; a group in none is UNASSIGNED. The order of the lines does not matter.">
      <ul className="grid gap-1.5 text-small">
        {set.recipe.rules.map(({ code, name, groupLabels, groupNames }) => (
          <li key={code} className="grid grid-cols-[5.5rem_minmax(0,1fr)] gap-2 border-b border-rule pb-1.5">
            <span className="font-mono text-caption leading-[18px]">{code}</span>
            <span><span className="font-medium">{name}</span><br /><span className="text-ink-2">{groupLabels.map((label, i) => `group ${label}, ${groupNames[i] ?? ''}`).join('; ')}</span></span>
          </li>
        ))}
      </ul>
      <div className="mt-3">
        <Facts facts={[
          { term: 'Snapshot', value: <span className="font-mono text-caption" title={set.snapshotId}>{set.snapshotNumber}, {formatHash(set.snapshotId)}</span> },
          { term: 'Recipe', value: <span className="font-mono text-caption" title={set.recipe.recipeSha256}>{formatHash(set.recipe.recipeSha256)}</span> },
          { term: 'Deleterious zones', value: set.zoneRunId === null ? 'none flagged' : `run ${set.zoneRunId}` },
        ]} />
      </div>
    </Plate>
  );
}
