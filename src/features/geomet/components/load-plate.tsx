import type { ZoneRun } from '#contract/geomet.ts';
import { Empty } from '#src/components/ui/empty.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Run } from '#src/components/ui/run.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { tableExports } from '#src/components/ui/table/table-tools.tsx';
import { formatMetres, formatShare } from '#src/lib/format.ts';

type DomainLoad = ZoneRun['byDomain'][number];

function exported(run: ZoneRun): Column<DomainLoad>[] {
  return [
    { header: 'Domain', rowHeader: true, value: ({ code }) => code, cell: ({ code }) => code },
    { header: 'Metres', value: ({ metres }) => metres, cell: ({ metres }) => metres },
    { header: 'Flagged share', value: ({ share }) => share, cell: ({ share }) => share },
    ...run.byAnalyte.map(({ analyte }): Column<DomainLoad> => ({
      header: `${analyte} share`,
      value: ({ byAnalyte }) => byAnalyte.find((own) => own.analyte === analyte)?.share ?? 0,
      cell: ({ byAnalyte }) => byAnalyte.find((own) => own.analyte === analyte)?.share ?? 0,
    })),
  ];
}

/** How much of each domain lies in zones, element by element, as runs of core. */
export function LoadPlate({ run }: { run: ZoneRun }) {
  const elements = run.byAnalyte.map(({ analyte }) => analyte);
  return (
    <Plate title="Load of each domain" qualifier="share of its metres in zones" stale={run.isStale && 'tables, limits or domains changed'} exports={tableExports('deleterious-load', exported(run), run.byDomain)} caption={`Zones with their dilution · an interval may lie in zones of several elements · snapshot ${run.snapshotNumber}`} empty={run.byDomain.length === 0 ? <Empty>Accept candidate domains to see which of them carry these zones.</Empty> : undefined}>
      <div className="overflow-x-auto">
        <table className="w-full text-small">
          <caption className="sr-only">Share of each domain in deleterious zones</caption>
          <thead className="text-caption text-ink-2">
            <tr>
              <th scope="col" className="py-1 text-left font-semibold">Domain</th>
              <th scope="col" className="px-2 text-right font-semibold">Length</th>
              <th scope="col" className="w-1/3 px-2 text-left font-semibold">In any zone</th>
              {elements.map((element) => <th key={element} scope="col" className="px-2 text-right font-semibold">{element}</th>)}
            </tr>
          </thead>
          <tbody>
            {run.byDomain.map(({ code, metres, share, byAnalyte }) => (
              <tr key={code} className="border-t border-rule">
                <th scope="row" className="py-1.5 text-left font-mono text-caption font-medium">{code}</th>
                <td className="px-2 text-right tabular-nums">{formatMetres(metres)}</td>
                <td className="px-2"><span className="flex items-center gap-2"><span className="flex-1"><Run label={`${code} in zones`} heightPx={10} parts={[{ share, label: 'in a zone', fill: 'var(--ink-2)' }]} /></span><span className="w-12 text-right tabular-nums">{formatShare(share)}</span></span></td>
                {elements.map((element) => <td key={element} className="px-2 text-right tabular-nums">{formatShare(byAnalyte.find(({ analyte }) => analyte === element)?.share ?? 0)}</td>)}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </Plate>
  );
}
