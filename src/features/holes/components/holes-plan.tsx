import { useQuery } from '@tanstack/react-query';
import { useMemo, useState } from 'react';
import type { PayAnalyte } from '#contract/deposits.ts';
import type { HoleRow } from '#contract/holes.ts';
import { FRAME, type FaultPlane, type Snapshot } from '#contract/snapshots.ts';
import { PlanView } from '#src/components/charts/plan-view.tsx';
import { useFigure } from '#src/components/charts/use-figure.ts';
import { LinkButton } from '#src/components/ui/button.tsx';
import { figureExports } from '#src/components/ui/figure-exports.ts';
import { Plate } from '#src/components/ui/plate.tsx';
import { Select } from '#src/components/ui/select.tsx';
import { columnQuery } from '#src/lib/columns.ts';
import { countOf, formatFigures, formatGrade, formatInterval, formatMetres, gradeIn } from '#src/lib/format.ts';
import { faultLine, reachOf } from '#src/lib/hole-traces.ts';
import { gradeLimits, planTraces, type PlanGrades } from '../hole-plan.ts';
import { holePath } from '../hole-path.ts';
import { shownUnit } from '../units.ts';

interface Props {
  depositId: number;
  depositName: string;
  gridName: string;
  holes: readonly HoleRow[];
  faults: readonly FaultPlane[];
  snapshot: Snapshot | null;
  payAnalytes: readonly PayAnalyte[];
  chosen: string;
  onChoose: (hole: string) => void;
  /** Analyte the traces are coloured by; empty for none. */
  analyte: string;
  onAnalyte: (analyte: string) => void;
}

/** Grades of one analyte for all rows, with their depths; null until read, or where there are none. */
function usePlanGrades(depositId: number, snapshot: Snapshot | null, analyte: string): PlanGrades | null {
  const assayTableId = snapshot?.assayTableId ?? null;
  const isWanted = assayTableId !== null && snapshot !== null && analyte !== '';
  const read = { enabled: isWanted };
  const { data: values } = useQuery({ ...columnQuery(depositId, assayTableId ?? 0, analyte), ...read });
  const { data: fromM } = useQuery({ ...columnQuery(depositId, snapshot?.frameTableId ?? 0, FRAME.from), ...read });
  const { data: toM } = useQuery({ ...columnQuery(depositId, snapshot?.frameTableId ?? 0, FRAME.to), ...read });
  return useMemo(() => (values && fromM && toM ? { values, fromM, toM, limits: gradeLimits(values) } : null), [values, fromM, toM]);
}

/** The holes from above, coloured by grade; a press marks one. */
export function HolesPlan(props: Props) {
  const { depositId, depositName, gridName, holes, faults, snapshot, payAnalytes, chosen, onChoose, analyte, onAnalyte } = props;
  const chart = useFigure();
  const [hovered, setHovered] = useState<number | null>(null);
  const grades = usePlanGrades(depositId, snapshot, analyte);
  const traces = useMemo(() => planTraces(holes, grades), [holes, grades]);
  const lines = useMemo(() => {
    const reach = reachOf(holes);
    return reach ? faults.flatMap((fault) => faultLine(fault, reach) ?? []) : [];
  }, [holes, faults]);
  const selectedHoles = useMemo(() => new Set(chosen === '' ? [] : [chosen]), [chosen]);
  const unit = shownUnit(analyte, payAnalytes, snapshot?.analytes ?? []);
  const rowOwner = useMemo(() => [...holes].sort((a, b) => a.firstRow - b.firstRow), [holes]);
  const metres = holes.reduce((sum, { lengthM }) => sum + lengthM, 0);
  const caption = `${countOf(holes.length, 'hole')}, ${formatMetres(metres)}${grades ? ` · ${analyte}: steps at the 50th, 75th, 90th, 95th and 99th percentile of all intervals` : ''}${lines.length > 0 ? ' · broken: faults at the level of their points' : ''}`;
  const table = useMemo(
    () => ({ caption: 'Holes with their collars', columns: ['Hole', 'East, m', 'North, m', 'Elevation, m', 'Length, m'], rows: holes.map(({ hole, x, y, z, lengthM }) => [hole, x, y, z, lengthM]) }),
    [holes],
  );
  const tooltip = (row: number) => {
    const owner = rowOwner.findLast(({ firstRow }) => firstRow <= row);
    if (!owner) return null;
    return (
      <>
        <b className="font-mono">{owner.hole}</b>
        {grades ? (
          <span className="block">{formatInterval(grades.fromM[row] ?? NaN, grades.toM[row] ?? NaN)}, {analyte} {formatGrade(grades.values[row] ?? NaN, unit)}</span>
        ) : (
          <span className="block">{formatMetres(owner.lengthM)}</span>
        )}
      </>
    );
  };
  const analytes = snapshot?.analytes.filter(({ supports }) => supports.includes('drill')) ?? [];
  return (
    <Plate
      title="Plan"
      qualifier={`${gridName}, m`}
      caption={caption}
      className="min-h-0"
      tools={
        <>
          {chosen !== '' && <LinkButton size="tiny" to={holePath(depositId, chosen)}>Open {chosen}</LinkButton>}
          {analytes.length > 0 && (
            <Select
              label="Traces coloured by"
              isLabelHidden
              controlSize="tiny"
              className="w-32"
              options={[{ value: '', label: 'no colour' }, ...analytes.map((summary) => ({ value: summary.analyte, label: `grade, ${summary.analyte}` }))]}
              value={analyte}
              onPick={onAnalyte}
            />
          )}
        </>
      }
      exports={figureExports(chart.drawn, { fileName: `${depositName}-holes`, caption, table: () => table })}
    >
      <div className="h-full max-lg:h-96">
        <PlanView
          chartRef={chart.ref}
          title={`Plan of the holes of ${depositName}`}
          description={`${countOf(holes.length, 'hole')} from above on ${gridName}${grades ? `, coloured by ${analyte}` : ''}`}
          holes={traces}
          faults={lines}
          table={table}
          height="fill"
          hovered={hovered}
          onHover={setHovered}
          tooltip={tooltip}
          selectedHoles={selectedHoles}
          onHole={onChoose}
          foot={grades && grades.limits.length > 0 ? <StepKey limits={grades.limits.map((ppm) => gradeIn(ppm, unit))} label={`${analyte}, ${unit}`} /> : undefined}
        />
      </div>
    </Plate>
  );
}

/** The six steps of the sequence with the grades between them. */
function StepKey({ limits, label }: { limits: readonly number[]; label: string }) {
  return (
    <div className="flex flex-wrap items-center gap-x-2 pt-1 text-caption text-ink-2">
      {label}
      <span className="flex items-center gap-1">
        {[1, 2, 3, 4, 5, 6].map((step) => (
          <span key={step} className="flex items-center gap-1">
            <span aria-hidden className="block h-2.5 w-6 border border-ink-3" style={{ backgroundColor: `var(--s${step})` }} />
            {step <= limits.length && formatFigures(limits[step - 1] ?? NaN, 2)}
          </span>
        ))}
      </span>
    </div>
  );
}
