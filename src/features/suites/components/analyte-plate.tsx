import { useMemo } from 'react';
import type { AnalyteSummary } from '#contract/snapshots.ts';
import { Button } from '#src/components/ui/button.tsx';
import { Checkbox } from '#src/components/ui/choices.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Run } from '#src/components/ui/run.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { tableExports } from '#src/components/ui/table/table-tools.tsx';
import { formatCount, formatFigures, formatShare } from '#src/lib/format.ts';

interface Props {
  analytes: readonly AnalyteSummary[];
  chosen: ReadonlySet<string>;
  onChosen: (analytes: string[]) => void;
  snapshotNumber: number;
}

const DECISIONS = {
  keep: { tone: 'good', word: 'keep' },
  'keep-with-care': { tone: 'warn', word: 'with care' },
  drop: { tone: 'plain', word: 'leave out' },
} as const;

const HELP = {
  text: 'Analytes with few values below detection carry log-ratios best. A value below its limit becomes a share of that limit before the logarithm.',
  caution: 'Above 30 % below detection the replacement makes a spike that can pass for a group of its own.',
  source: 'Martín-Fernández, Barceló-Vidal and Pawlowsky-Glahn 2003',
};

export const recommended = (analytes: readonly AnalyteSummary[]): string[] => analytes.filter(({ decision }) => decision !== 'drop').map(({ analyte }) => analyte);

function columnsFor(chosen: ReadonlySet<string>, toggle: (analyte: string) => void): Column<AnalyteSummary>[] {
  return [
    { header: 'Analyte', rowHeader: true, isControl: true, widthRem: 6, value: ({ analyte }) => analyte, cell: ({ analyte }) => <Checkbox label={analyte} checked={chosen.has(analyte)} onChange={() => toggle(analyte)} /> },
    {
      header: 'Below detection', widthRem: 9, value: ({ belowShare }) => belowShare,
      cell: ({ analyte, belowShare }) => <span className="flex items-center gap-2"><span className="w-14"><Run label={`${analyte} below detection`} heightPx={8} parts={[{ share: belowShare, label: 'below detection', fill: 'var(--ink-2)' }]} /></span>{formatShare(belowShare)}</span>,
    },
    { header: 'Missing', align: 'right', widthRem: 5, value: ({ missingShare }) => missingShare, cell: ({ missingShare }) => formatShare(missingShare) },
    { header: 'Limits', unit: 'ppm', widthRem: 8, value: ({ limitsPpm }) => limitsPpm.map(({ limit }) => limit).join(' '), cell: ({ limitsPpm }) => (limitsPpm.length === 0 ? '–' : limitsPpm.slice(0, 3).map(({ limit }) => formatFigures(limit, 2)).join(', ')) },
    { header: 'Median', unit: 'ppm', align: 'right', widthRem: 6, value: ({ medianPpm }) => medianPpm, cell: ({ medianPpm }) => (medianPpm === null ? '–' : formatFigures(medianPpm, 3)) },
    { header: 'Advice', widthRem: 8, value: ({ decision }) => DECISIONS[decision].word, cell: ({ decision }) => <Chip tone={DECISIONS[decision].tone}>{DECISIONS[decision].word}</Chip> },
    { header: 'Because', value: ({ reason, caution }) => [reason, caution].filter(Boolean).join('; '), widthRem: 22, cell: ({ reason, caution }) => <Because text={[reason, caution].filter(Boolean).join('; ')} /> },
  ];
}

/** The reason on two lines at most; all of it on hover and in the CSV. */
function Because({ text }: { text: string }) {
  return <span className="line-clamp-2 text-caption text-ink-2" title={text}>{text}</span>;
}

/** Analytes of the snapshot with what each can bear, to tick the suite from. */
export function AnalytePlate({ analytes, chosen, onChosen, snapshotNumber }: Props) {
  const columns = useMemo(() => {
    const toggle = (analyte: string): void => onChosen(chosen.has(analyte) ? [...chosen].filter((other) => other !== analyte) : [...chosen, analyte]);
    return columnsFor(chosen, toggle);
  }, [chosen, onChosen]);
  const advised = recommended(analytes);
  return (
    <Plate
      title="Analytes"
      qualifier={`${formatCount(chosen.size)} of ${formatCount(analytes.length)} chosen`}
      help={HELP}
      tools={<><Button size="tiny" onClick={() => onChosen(advised)}>Take the {formatCount(advised.length)} advised</Button><Button size="tiny" kind="bare" unavailable={chosen.size === 0 && 'None is chosen'} onClick={() => onChosen([])}>Clear</Button></>}
      exports={tableExports('analytes', columns, analytes)}
      caption={`Shares of analysed rows · limits as stored, in ppm · snapshot ${snapshotNumber}`}
    >
      <Table caption="Analytes of the snapshot" columns={columns} rows={analytes} rowKey={({ analyte }) => analyte} maxHeightRem={30} />
    </Plate>
  );
}
