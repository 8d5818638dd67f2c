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
import { countOf, formatCount, formatFigures, formatShare, MISSING, THIN_SPACE } from '#src/lib/format.ts';

interface Props {
  analytes: readonly AnalyteSummary[];
  chosen: readonly string[];
  /** Memoise it. */
  onChosen: (analytes: string[]) => void;
  snapshotNumber: number;
}

const DECISIONS = {
  keep: { tone: 'good', word: 'keep' },
  'keep-with-care': { tone: 'warn', word: 'with care' },
  drop: { tone: 'plain', word: 'leave out' },
} as const;

const HELP = {
  text: 'Every analyte of the suite counts alike in a log-ratio, so one that is mostly below detection, missing or badly dissolved adds noise to all. Up to 5 % below detection a simple replacement is adequate; over 50 % only above or below the limit is known.',
  caution: 'The advice looks at numbers only. Keep an analyte against it where it parts two rocks, and compare with and without.',
  source: 'Replacement: Martín-Fernández, Barceló-Vidal & Pawlowsky-Glahn 2003. The steps at 5, 30 and 50 % are this project’s own.',
};

export const recommended = (analytes: readonly AnalyteSummary[]): string[] => analytes.filter(({ decision }) => decision !== 'drop').map(({ analyte }) => analyte);

const reasonsOf = ({ reason, caution }: AnalyteSummary): string => [reason, caution].filter(Boolean).join('; ');

function columnsFor(chosen: ReadonlySet<string>, toggle: (analyte: string) => void): Column<AnalyteSummary>[] {
  return [
    { header: 'Take', isControl: true, isSortable: false, widthRem: 3, cell: ({ analyte }) => <Checkbox label={`Take ${analyte}`} isLabelHidden checked={chosen.has(analyte)} onChange={() => toggle(analyte)} /> },
    { header: 'Analyte', rowHeader: true, widthRem: 4, cell: ({ analyte }) => analyte },
    { header: 'Advice', widthRem: 7, isWhole: true, value: ({ decision }) => DECISIONS[decision].word, cell: ({ decision }) => <Chip tone={DECISIONS[decision].tone}>{DECISIONS[decision].word}</Chip> },
    { header: 'Below detection', widthRem: 9, value: ({ belowShare }) => belowShare, cell: (row) => <BelowRun {...row} /> },
    { header: 'Missing', align: 'right', widthRem: 5, value: ({ missingShare }) => missingShare, cell: ({ missingShare }) => formatShare(missingShare) },
    {
      header: 'Limits',
      unit: 'ppm',
      widthRem: 5.5,
      value: ({ limitsPpm }) => limitsPpm.map(({ limit }) => limit).join(' '),
      cell: ({ limitsPpm }) => <span title={limitsPpm.map(({ limit, count }) => `${formatFigures(limit, 2)} ppm in ${countOf(count, 'row')}`).join(', ')}>{limitsPpm.length === 0 ? MISSING : limitsPpm.slice(0, 3).map(({ limit }) => formatFigures(limit, 2)).join(', ')}</span>,
    },
    { header: 'Median', unit: 'ppm', align: 'right', widthRem: 5, value: ({ medianPpm }) => medianPpm, cell: ({ medianPpm }) => (medianPpm === null ? MISSING : formatFigures(medianPpm, 3)) },
    { header: 'Because', isSortable: false, value: reasonsOf, cell: (row) => <Because {...row} /> },
  ];
}

function BelowRun({ analyte, belowShare }: AnalyteSummary) {
  return (
    <span className="flex items-center gap-2">
      <span className="w-14">
        <Run label={`${analyte} below detection`} heightPx={8} parts={[{ share: belowShare, label: 'below detection', fill: 'var(--ink-2)' }]} />
      </span>
      {formatShare(belowShare)}
    </span>
  );
}

/** A number and its unit stay on one line. */
const unbroken = (text: string): string => text.replaceAll(/(\d) (?=%|ppm)/g, `$1${THIN_SPACE}`);

/** The reason, with a mark where the digestion asks for care. */
function Because(row: AnalyteSummary) {
  return (
    <span className="block min-w-56 text-caption text-ink-2">
      {unbroken(row.reason)}
      {row.caution !== null && <span className="text-warn">; {unbroken(row.caution)}</span>}
    </span>
  );
}

/** Analytes of the snapshot with what each can bear, to tick the suite from. */
export function AnalytePlate({ analytes, chosen, onChosen, snapshotNumber }: Props) {
  const columns = useMemo(() => {
    const taken = new Set(chosen);
    const toggle = (analyte: string): void => onChosen(analytes.map(({ analyte: name }) => name).filter((name) => (name === analyte ? !taken.has(name) : taken.has(name))));
    return columnsFor(taken, toggle);
  }, [analytes, chosen, onChosen]);
  const advised = recommended(analytes);
  const sure = analytes.filter(({ decision }) => decision === 'keep').map(({ analyte }) => analyte);
  const isTicked = (names: readonly string[]): boolean => names.join() === chosen.join();
  const tools = (
    <>
      <Button size="tiny" unavailable={isTicked(advised) && 'These are ticked'} onClick={() => onChosen(advised)}>
        Take the {formatCount(advised.length)} advised
      </Button>
      <Button size="tiny" unavailable={sure.length === 0 ? 'No analyte is measured without a caution' : isTicked(sure) && 'These are ticked'} onClick={() => onChosen(sure)}>
        Only the {formatCount(sure.length)} without care
      </Button>
      <Button size="tiny" kind="bare" unavailable={chosen.length === 0 && 'None is ticked'} onClick={() => onChosen([])}>
        Clear
      </Button>
    </>
  );
  return (
    <Plate
      title="Analytes"
      qualifier={<span aria-live="polite">{`${formatCount(chosen.length)} of ${formatCount(analytes.length)} ticked`}</span>}
      help={HELP}
      tools={tools}
      exports={tableExports('analytes', columns, analytes)}
      caption={`n = ${countOf(Math.max(0, ...analytes.map(({ n }) => n)), 'row')} at most · shares of all rows · limits and medians in ppm · snapshot ${snapshotNumber}`}
    >
      <Table caption="Analytes of the snapshot" columns={columns} rows={analytes} rowKey={({ analyte }) => analyte} rowClass={({ analyte }) => !chosen.includes(analyte) && 'text-ink-3'} className="lg:max-h-[max(24rem,calc(100dvh-14.5rem))]" />
    </Plate>
  );
}
