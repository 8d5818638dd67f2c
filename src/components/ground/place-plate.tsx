import { useQuery } from '@tanstack/react-query';
import { useMemo, type ReactNode } from 'react';
import { FRAME } from '#contract/snapshots.ts';
import { columnQuery } from '#src/lib/columns.ts';
import { holesQuery } from '#src/lib/deposit-queries.ts';
import { countOf } from '#src/lib/format.ts';
import type { Frame } from '#src/lib/frame.ts';
import { faultLine, reachOf } from '#src/lib/hole-traces.ts';
import { hoverRow, useHoveredRow, useSelection } from '#src/lib/selection.ts';
import { useDeposit } from '#src/lib/use-deposit.ts';
import type { HoleTrace } from '../charts/hole-geometry.ts';
import { PlanView } from '../charts/plan-view.tsx';
import { SectionView } from '../charts/section-view.tsx';
import { useFigure } from '../charts/use-figure.ts';
import { figureExports } from '../ui/figure-exports.ts';
import type { HelpText } from '../ui/help.tsx';
import { Skeleton } from '../ui/loading.tsx';
import { Plate } from '../ui/plate.tsx';
import { Select } from '../ui/select.tsx';
import { sectionLines, usualLine, type SectionLine } from './sections.ts';
import { paintedHoles, paintedSamples, type RowPaint } from './traces.ts';

export type PlaceKind = 'section' | 'plan';

interface Props {
  frame: Frame;
  support: 'drill' | 'surface';
  /** Memoise it: a new one lays every interval again. */
  paint: RowPaint;
  /** What is coloured: "by group". */
  subject: string;
  kind: PlaceKind;
  onKind: (kind: PlaceKind) => void;
  /** Coordinate of the section asked for; the fence with most holes when null or unknown. */
  sectionM: number | null;
  /** Shows a section; the page leaves the plan. */
  onSection: (sectionM: number) => void;
  onHole: (name: string) => void;
  tooltip: (row: number) => ReactNode;
  /** Colour key. */
  foot?: ReactNode;
  help: HelpText;
  caption: string;
  stale?: string | null;
  height: number | 'fill';
  className?: string;
}

/** Where the rows lie: holes on a section or from above, surface samples from above. */
export function PlacePlate(props: Props) {
  const { frame, support, subject, kind, tooltip, caption } = props;
  const deposit = useDeposit();
  const chart = useFigure();
  const { traces, faults, error, isPending, refetch } = useTraces(frame, support, props.paint);
  const lines = useMemo(() => (support === 'drill' ? sectionLines(traces) : []), [traces, support]);
  const line = lines.find(({ atM }) => atM === props.sectionM) ?? lines[usualLine(lines)];
  const isPlan = support === 'surface' || kind === 'plan' || line === undefined;
  const selected = useSelection();
  const hovered = useHoveredRow();
  const title = isPlan ? 'Plan' : 'Section';
  const basics = {
    chartRef: chart.ref,
    holes: traces,
    selected,
    hovered,
    onHover: hoverRow,
    tooltip,
    foot: props.foot,
    height: props.height,
    title: isPlan ? `Plan, ${subject}` : `Section ${lineName(line)}, ${subject}`,
    description: isPlan ? `${countOf(traces.length, support === 'drill' ? 'hole' : 'sample')} from above, ${subject}.` : `${countOf(line.holes.length, 'hole')} within ${line.plane.halfWidthM} m of the section at ${lineName(line)}, ${subject}; vertical scale as horizontal.`,
    ...(support === 'drill' ? { onHole: props.onHole } : {}),
  };
  const whole = `${title}${isPlan ? '' : ` ${lineName(line)}, ±\u2009${line.plane.halfWidthM} m`} · ${caption}`;
  return (
    <Plate
      title={title}
      qualifier={isPlan ? undefined : `±\u2009${line.plane.halfWidthM}\u202fm`}
      stale={props.stale ?? null}
      tools={support === 'drill' && lines.length > 0 && <PlaceTools {...props} lines={lines} line={line} isPlan={isPlan} />}
      error={traces.length > 0 ? undefined : error}
      onRetry={refetch}
      exports={figureExports(chart.drawn, { fileName: `${deposit.name}-${title.toLowerCase()}`, caption: whole, table: () => placeTable(frame, traces) })}
      help={props.help}
      caption={caption}
      className={props.className ?? ''}
    >
      {isPending ? <Skeleton lines={6} /> : isPlan ? <PlanView {...basics} faults={faults} /> : <SectionView {...basics} section={line.plane} />}
    </Plate>
  );
}

export const lineName = ({ atM, letter }: SectionLine): string => `${atM} ${letter}`;

interface ToolsProps extends Pick<Props, 'onKind' | 'onSection'> {
  lines: readonly SectionLine[];
  line: SectionLine | undefined;
  isPlan: boolean;
}

/** One list for both: a section by its coordinate, or the plan. */
function PlaceTools({ lines, line, isPlan, onKind, onSection }: ToolsProps) {
  return (
    <Select
      label="Section or plan"
      isLabelHidden
      controlSize="tiny"
      className="w-[5.5rem]"
      value={isPlan ? 'plan' : String(line?.atM ?? '')}
      options={[{ value: 'plan', label: 'Plan' }, ...lines.map((other) => ({ value: String(other.atM), label: lineName(other), group: 'Sections' }))]}
      onPick={(value) => {
        if (value === 'plan') onKind('plan');
        else onSection(Number(value));
      }}
    />
  );
}

function useTraces(frame: Frame, support: Props['support'], paint: RowPaint) {
  const { id } = useDeposit();
  const holes = useQuery({ ...holesQuery(id), enabled: support === 'drill' });
  const place = (name: string) => ({ ...columnQuery(id, frame.tableId, name), enabled: support === 'surface' });
  const [x, y, z] = [useQuery(place(FRAME.x)), useQuery(place(FRAME.y)), useQuery(place(FRAME.z))];
  const traces = useMemo((): HoleTrace[] => {
    if (support === 'drill') return holes.data ? paintedHoles(holes.data.holes, frame, paint) : [];
    return x.data && y.data && z.data ? paintedSamples(frame, { x: x.data, y: y.data, z: z.data }, paint) : [];
  }, [support, holes.data, x.data, y.data, z.data, frame, paint]);
  const faults = useMemo(() => {
    const reach = reachOf(holes.data?.holes ?? []);
    return reach ? (holes.data?.faults ?? []).flatMap((fault) => faultLine(fault, reach) ?? []) : [];
  }, [holes.data]);
  const error = support === 'drill' ? holes.error : (x.error ?? y.error ?? z.error);
  const isPending = support === 'drill' ? holes.isPending : x.isPending || y.isPending || z.isPending;
  return { traces, faults, error, isPending, refetch: () => void holes.refetch() };
}

function placeTable(frame: Frame, traces: readonly HoleTrace[]) {
  const rows = traces.flatMap(({ name, intervals }) => intervals.map(({ row, fromM, toM, slot, stop }) => [frame.holeAt(row) ?? name, fromM, toM, slot ?? stop ?? null]));
  return { columns: ['Hole', 'From, m', 'To, m', 'Colour slot or step'], rows };
}
