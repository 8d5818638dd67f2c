import { Link } from 'react-router-dom';
import type { Overview } from '#contract/deposits.ts';
import { Chip } from '#src/components/ui/chip.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { tableExports } from '#src/components/ui/table/table-tools.tsx';
import { VERDICT_WORDS, VerdictMark } from '#src/components/ui/verdict-mark.tsx';
import { formatGrade } from '#src/lib/format.ts';
import { formatInstantFully, formatWhen } from '#src/lib/format-dates.ts';
import { STAGE_NAMES, stagePath } from '#src/lib/stages.ts';

export function WaitingPlate({
  waiting,
  depositId,
  className,
}: {
  waiting: Overview['waiting'];
  depositId: number;
  className?: string;
}) {
  return (
    <Plate
      title="What is waiting"
      className={className}
      empty={
        waiting.length === 0 ? (
          <Empty>Nothing waits. What needs a decision appears here, in the order of the job.</Empty>
        ) : undefined
      }
    >
      <ul className="m-0 list-none p-0">
        {waiting.map(({ stage, tone, title, detail }) => (
          <li
            key={`${stage} ${title}`}
            className="grid grid-cols-[1fr_auto] items-start gap-x-2.5 gap-y-0.5 border-b border-rule py-[7px] text-small last:border-0 md:grid-cols-[6.200rem_1fr_auto]"
          >
            <Chip tone={tone} className="justify-self-start md:w-full">
              {STAGE_NAMES[stage]}
            </Chip>
            <div className="min-w-0 max-md:col-span-2 max-md:row-start-2">
              <p className="font-semibold">{title}</p>
              <p className="text-ink-3">{detail}</p>
            </div>
            <Link
              to={stagePath(depositId, stage)}
              aria-label={`Open: ${title}`}
              className="inline-block min-h-6"
            >
              Open
            </Link>
          </li>
        ))}
      </ul>
    </Plate>
  );
}

export function LatelyPlate({
  lately,
  className,
}: {
  lately: Overview['lately'];
  className?: string;
}) {
  return (
    <Plate
      title="Lately"
      className={className}
      empty={
        lately.length === 0 ? (
          <Empty>What people do on this deposit is told here, newest first.</Empty>
        ) : undefined
      }
    >
      <ul className="m-0 list-none p-0">
        {lately.map(({ at, who, what }, index) => (
          <li key={index} className="grid grid-cols-[4.500rem_1fr] gap-x-2 py-[3px] text-small">
            <time dateTime={at} title={formatInstantFully(at)} className="text-ink-3">
              {formatWhen(at)}
            </time>
            <span className="min-w-0">
              <b>{who}</b> {what}
            </span>
          </li>
        ))}
      </ul>
    </Plate>
  );
}

type Grade = Overview['grades'][number];

const VARIABLE: Column<Grade> = {
  header: 'Variable',
  rowHeader: true,
  cell: ({ analyte, domainCode }) => `${analyte} in ${domainCode}`,
};
const VERDICT: Column<Grade> = {
  header: 'Verdict',
  cell: ({ verdict }) => <VerdictMark verdict={verdict} />,
  value: ({ verdict }) => VERDICT_WORDS[verdict],
};

const GRADE_COLUMNS: Column<Grade>[] = [
  VARIABLE,
  {
    header: 'Median',
    align: 'right',
    cell: ({ median, unit }) => formatGrade(median, unit),
    value: ({ median }) => median,
  },
  VERDICT,
];

/** In a file a column has one unit. */
const FILE_COLUMNS: Column<Grade>[] = [
  VARIABLE,
  { header: 'Median', unit: 'ppm', cell: ({ median }) => median },
  { header: 'n', cell: ({ n }) => n },
  VERDICT,
];

export function GradesPlate({
  grades,
  className,
}: {
  grades: Overview['grades'];
  className?: string;
}) {
  return (
    <Plate
      title="Grades in candidate domains"
      qualifier="length-weighted"
      className={className}
      exports={
        grades.length > 0 ? tableExports('grades-in-domains', FILE_COLUMNS, grades) : undefined
      }
      empty={
        grades.length === 0 ? (
          <Empty>
            Once groups are accepted as candidate domains and screened, their grades and mixing
            verdicts stand here.
          </Empty>
        ) : undefined
      }
    >
      <Table
        caption="Median grade and mixing verdict of each pay analyte in each candidate domain"
        columns={GRADE_COLUMNS}
        rows={grades}
        rowKey={({ analyte, domainCode }) => `${domainCode} ${analyte}`}
        maxHeightRem={16}
      />
    </Plate>
  );
}
