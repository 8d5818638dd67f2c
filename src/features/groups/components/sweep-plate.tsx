import type { Sweep } from '#contract/groupings.ts';
import { LineChart } from '#src/components/charts/line-chart.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { useFigure } from '#src/components/charts/use-figure.ts';
import { figureExports } from '#src/components/ui/figure-exports.ts';
import { Plate, type PlateBusy } from '#src/components/ui/plate.tsx';
import { countOf } from '#src/lib/format.ts';
import { useDeposit } from '#src/lib/use-deposit.ts';
import { sweepPanels } from '../model.ts';

interface Props {
  sweep: Sweep | null;
  chosenK: number | null;
  onK: (k: number) => void;
  busy: PlateBusy | null;
  className?: string;
}

const HELP = {
  text: 'k-means for each number of groups, with criteria side by side: silhouette (how much nearer a row is to its own group than to the next) and Calinski–Harabasz (spread between groups over spread within). Higher is better in both. A press takes that k for the next run.',
  caution: 'No index decides alone: they often disagree. Judge k with contiguity down the hole, with fingerprints, and with the geology.',
  source: 'Rousseeuw 1987; Caliński & Harabasz 1974; Davies & Bouldin 1979 (in the CSV).',
};

/** How many groups: criteria of the sweep against k. */
export function SweepPlate({ sweep, chosenK, onK, busy, className }: Props) {
  const deposit = useDeposit();
  const chart = useFigure();
  const caption = sweep === null ? '' : `${countOf(sweep.components, 'component')}, silhouette on ${countOf(sweep.silhouetteRows, 'row')}, seed ${sweep.seed}`;
  const table = {
    caption: 'Criteria for each number of groups',
    columns: ['Groups, k', 'Silhouette', 'Calinski–Harabasz', 'Davies–Bouldin', 'Inertia'],
    rows: (sweep?.rows ?? []).map(({ k, silhouette, calinskiHarabasz, daviesBouldin, inertia }) => [k, silhouette ?? '', calinskiHarabasz ?? '', daviesBouldin ?? '', inertia]),
  };
  return (
    <Plate
      title="Sweep"
      qualifier={chosenK === null ? undefined : `k = ${chosenK}`}
      stale={sweep?.isStale ? 'sweep again' : null}
      busy={busy}
      help={HELP}
      exports={sweep === null ? [] : figureExports(chart.drawn, { fileName: `${deposit.name}-sweep`, caption: `${caption}. ${sweep.suggestion}`, table: () => table })}
      caption={sweep === null ? undefined : <span title={`${caption}. ${sweep.suggestion}`}>{countOf(sweep.components, 'component')} · seed {sweep.seed}</span>}
      empty={sweep === null ? <Empty>Each number of groups is tried here, with criteria side by side. Start a sweep with the button above.</Empty> : undefined}
      className={className ?? ''}
    >
      {sweep !== null && (
        <LineChart chartRef={chart.ref} title="Criteria against the number of groups" description={sweep.suggestion} table={table} panels={sweepPanels(sweep)} xLabel="number of groups, k" wholeX chosen={chosenK} onChoose={onK} height="fill" />
      )}
    </Plate>
  );
}
