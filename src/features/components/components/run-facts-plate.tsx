import type { ComponentRun } from '#contract/components.ts';
import { Facts } from '#src/components/layout/selection-card.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { formatWhen } from '#src/lib/format-dates.ts';
import { formatCount, formatShare } from '#src/lib/format.ts';

interface Props {
  run: ComponentRun;
  stale: string | null;
}

const HELP = {
  text: 'A row with an analyte missing has no score. A row with more than 30 % of its analytes below detection is scored but does not shape the components.',
  caution: 'One value in place of every result below detection makes a spike: where more than 5 % were replaced, look whether it shows as a group of its own.',
  source: 'Martín-Fernández, Barceló-Vidal & Pawlowsky-Glahn 2003, replacement; 30 % is this project’s own limit.',
};

/** What went in and what was left out. */
export function RunFactsPlate({ run, stale }: Props) {
  return (
    <Plate title="What went in" stale={stale} help={HELP} caption={`${run.createdBy.name}, ${formatWhen(run.createdAt)} · seed ${run.seed}`}>
      <div className="grid gap-2">
        <Facts
          facts={[
            { term: 'Suite', value: run.suiteName },
            { term: 'Analytes', value: formatCount(run.parts.length) },
            { term: run.support === 'drill' ? 'Intervals fitted' : 'Samples fitted', value: formatCount(run.nFit) },
            { term: 'Scored only', value: formatCount(run.nScoredOnly) },
            { term: 'Left out, an analyte missing', value: formatCount(run.nLeftOut) },
            { term: `Values replaced, by ${run.replacementFraction} of their limit`, value: formatShare(run.replacedShare) },
          ]}
        />
        <p className="text-small text-ink-2">{run.suggestion}</p>
        {run.notes.length > 0 && (
          <ul className="grid list-disc gap-1 pl-4 text-small text-ink-2">
            {run.notes.map((note) => (
              <li key={note}>{note}</li>
            ))}
          </ul>
        )}
      </div>
    </Plate>
  );
}
