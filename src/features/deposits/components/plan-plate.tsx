import { useQuery } from '@tanstack/react-query';
import { useMemo, useRef } from 'react';
import type { ChartHandle } from '#src/components/charts/chart-types.ts';
import { PlanView } from '#src/components/charts/plan-view.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { useFigureExports } from '#src/components/ui/figure-exports.ts';
import { Skeleton } from '#src/components/ui/loading.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { holesQuery } from '#src/lib/deposit-queries.ts';
import { countOf, formatMetres } from '#src/lib/format.ts';
import { faultLine, reachOf, traceOf } from '#src/lib/hole-traces.ts';
import { useDeposit } from '#src/lib/use-deposit.ts';
import { gridWords } from '../model.ts';

/** Where the holes lie: collars, traces and faults from above. */
export function PlanPlate() {
  const deposit = useDeposit();
  const { data, error, refetch } = useQuery(holesQuery(deposit.id));
  const chart = useRef<ChartHandle>(null);
  const traces = useMemo(() => (data?.holes ?? []).map(traceOf), [data]);
  const faults = useMemo(() => {
    const reach = reachOf(data?.holes ?? []);
    return reach ? (data?.faults ?? []).flatMap((fault) => faultLine(fault, reach) ?? []) : [];
  }, [data]);
  const grid = `${gridWords(deposit.grid)}, m`;
  const metres = (data?.holes ?? []).reduce((sum, { lengthM }) => sum + lengthM, 0);
  const caption = `${countOf(traces.length, 'hole')}, ${formatMetres(metres)} · dots: collars${faults.length > 0 ? ' · broken: faults' : ''}`;
  const table = useMemo(
    () => ({
      caption: 'Holes with their collars',
      columns: ['Hole', 'East, m', 'North, m', 'Elevation, m', 'Length, m'],
      rows: (data?.holes ?? []).map(({ hole, x, y, z, lengthM }) => [hole, x, y, z, lengthM]),
    }),
    [data],
  );
  const exports = useFigureExports(chart, {
    fileName: `${deposit.name}-plan`,
    caption,
    table: () => table,
  });
  return (
    <Plate
      title="Plan"
      qualifier={grid}
      caption={traces.length > 0 ? caption : undefined}
      error={data ? undefined : error}
      onRetry={() => void refetch()}
      exports={traces.length > 0 ? exports : undefined}
      empty={
        data && traces.length === 0 ? (
          <Empty>Holes are drawn here from above once collars and surveys are loaded.</Empty>
        ) : undefined
      }
    >
      {data ? (
        <PlanView
          chartRef={chart}
          title={`Plan of ${deposit.name}`}
          description={`${countOf(traces.length, 'hole')} from above on ${grid}`}
          holes={traces}
          faults={faults}
          table={table}
          height={244}
        />
      ) : (
        <Skeleton lines={8} />
      )}
    </Plate>
  );
}
