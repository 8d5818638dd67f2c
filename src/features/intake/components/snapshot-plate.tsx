import type { Snapshot } from '#contract/snapshots.ts';
import { Facts } from '#src/components/layout/selection-card.tsx';
import { LinkButton } from '#src/components/ui/button.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Skeleton } from '#src/components/ui/loading.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { formatCount, formatMetres, formatShare } from '#src/lib/format.ts';
import { formatInstant } from '#src/lib/format-dates.ts';

interface Props {
  depositId: number;
  answer: { snapshot: Snapshot | null; assembling: boolean } | undefined;
  error: unknown;
  onRetry: () => void;
}

const HELP = {
  text: 'The tables in force put together: holes desurveyed, logs and faults joined to each assayed interval. Every analysis names the snapshot it ran on.',
  caution: 'Loading or going back to another revision makes a new snapshot; analyses on the one before turn stale and say so.',
};

/** What the tables in force make together. */
export function SnapshotPlate({ depositId, answer, error, onRetry }: Props) {
  const snapshot = answer?.snapshot ?? null;
  return (
    <Plate
      title={snapshot ? `Snapshot ${snapshot.number}` : 'Snapshot'}
      qualifier={snapshot && formatInstant(snapshot.createdAt)}
      help={HELP}
      error={answer ? undefined : error}
      onRetry={onRetry}
      busy={answer?.assembling ? { progress: null, phase: 'putting the tables together' } : null}
      empty={answer && !snapshot ? <Empty>The tables are put together here by themselves once collars with assays, or surface samples, are loaded.</Empty> : undefined}
    >
      {snapshot ? <SnapshotFacts snapshot={snapshot} depositId={depositId} /> : <Skeleton lines={6} />}
    </Plate>
  );
}

function SnapshotFacts({ snapshot, depositId }: { snapshot: Snapshot; depositId: number }) {
  const { rows, surfaceRows, holes, metresDrilled, metresAssayed, metresLogged, analytes, structures, faults, notes } = snapshot;
  const share = (metres: number) => (metresDrilled > 0 ? `${formatMetres(metres)}, ${formatShare(metres / metresDrilled)}` : formatMetres(metres));
  const facts = [
    { term: 'Holes', value: formatCount(holes) },
    { term: 'Drilled', value: formatMetres(metresDrilled) },
    { term: 'Assayed', value: share(metresAssayed) },
    { term: 'Logged', value: share(metresLogged) },
    { term: 'Assayed intervals', value: formatCount(rows - surfaceRows) },
    { term: 'Surface samples', value: formatCount(surfaceRows) },
    { term: 'Analytes', value: formatCount(analytes.length) },
    { term: 'Structures', value: formatCount(structures) },
    { term: 'Faults', value: formatCount(faults.length) },
  ];
  return (
    <div className="grid gap-2 pb-1">
      <Facts facts={facts} />
      {notes.length > 0 && (
        <ul aria-label="Notes of the snapshot" className="m-0 grid list-none gap-1 border-t border-dotted border-rule p-0 pt-1.5 text-small text-ink-2">
          {notes.map((note) => (
            <li key={note}>{note}</li>
          ))}
        </ul>
      )}
      {holes > 0 && <LinkButton to={`/deposits/${depositId}/holes`} isWide>Look at the {formatCount(holes)} holes</LinkButton>}
    </div>
  );
}
