import { useQuery } from '@tanstack/react-query';
import { ChevronsUpDown } from 'lucide-react';
import { useMemo, type ReactNode } from 'react';
import type { ComponentRun } from '#contract/components.ts';
import { columnQuery } from '#src/lib/columns.ts';
import { cx } from '#src/lib/cx.ts';
import { formatFigures, formatShare } from '#src/lib/format.ts';
import type { Frame } from '#src/lib/frame.ts';
import { hoverRow, useHoveredRow, useSelection } from '#src/lib/selection.ts';
import { takeChoice } from '#src/lib/take-choice.ts';
import { useDeposit } from '#src/lib/use-deposit.ts';
import type { Category } from '../charts/chart-types.ts';
import { Scatter } from '../charts/scatter.tsx';
import { ScatterTools, type ScatterTool } from '../charts/scatter-tools.tsx';
import { Button } from '../ui/button.tsx';
import { useFigure } from '../charts/use-figure.ts';
import { figureExports } from '../ui/figure-exports.ts';
import { Skeleton } from '../ui/loading.tsx';
import { Panel } from '../ui/panel.tsx';
import { Plate, type PlateBusy } from '../ui/plate.tsx';
import { Select } from '../ui/select.tsx';
import { biplotRays, componentName, componentNumber, shortReading } from './component-words.ts';
import { RowTooltip } from './row-tooltip.tsx';

export interface BiplotView {
  x: string;
  y: string;
  tool: ScatterTool;
}

interface Props {
  run: ComponentRun;
  frame: Frame;
  view: BiplotView;
  onView: (change: Partial<BiplotView>) => void;
  /** Colours: index into `categories` a row. */
  categories: readonly Category[];
  category: ArrayLike<number> | undefined;
  /** Further lines of the tooltip. */
  linesOf: (row: number) => readonly ReactNode[];
  caption: string;
  stale?: string | null;
  busy?: PlateBusy | false | null;
  height: number | 'fill';
  /** Below the axes in their panel: what colours the points. */
  colourChoice?: ReactNode;
  className?: string;
}

/** Scores of two components with the parts as rays: take points by lasso, box, rule or legend. */
export function BiplotPlate(props: Props) {
  const { run, frame, view, onView, caption } = props;
  const deposit = useDeposit();
  const chart = useFigure();
  const [x, y] = [useQuery(columnQuery(deposit.id, run.tableId, view.x)), useQuery(columnQuery(deposit.id, run.tableId, view.y))];
  const selected = useSelection();
  const hovered = useHoveredRow();
  const rays = useMemo(() => biplotRays(run, componentNumber(view.x), componentNumber(view.y)), [run, view.x, view.y]);
  const shown = rays.length < run.parts.length ? ` · ${rays.length} of ${run.parts.length} rays` : '';
  const whole = `${caption}${shown}`;
  return (
    <Plate
      title="Biplot"
      stale={props.stale ?? null}
      busy={props.busy ?? null}
      qualifier={<Axes run={run} view={view} onView={onView} colourChoice={props.colourChoice} />}
      tools={<ScatterTools tool={view.tool} onTool={(tool) => onView({ tool })} />}
      error={x.error ?? y.error}
      onRetry={() => void Promise.all([x.refetch(), y.refetch()])}
      exports={figureExports(chart.drawn, {
        fileName: `${deposit.name}-${view.x}-${view.y}`,
        caption: whole,
        table: () => scoreTable(frame, view, x.data, y.data, props),
      })}
      help={BIPLOT_HELP}
      caption={whole}
      className={cx(props.className, view.tool === 'rule' && 'lg:min-h-[31rem]')}
    >
      {x.data && y.data ? (
        <Scatter
          chartRef={chart.ref}
          title={`Biplot of ${view.x} and ${view.y}`}
          description={`Scores of ${run.nFit + run.nScoredOnly} rows; ${view.x} sets ${shortReading(run, componentNumber(view.x))}.`}
          x={x.data}
          y={y.data}
          {...(props.category === undefined ? {} : { category: props.category, categories: props.categories })}
          selected={selected}
          hovered={hovered}
          onSelect={takeChoice}
          onHover={hoverRow}
          tool={view.tool}
          rays={rays}
          xLabel={axisLabel(run, view.x)}
          yLabel={axisLabel(run, view.y)}
          height={props.height}
          tooltip={(row) => (
            <RowTooltip
              frame={frame}
              row={row}
              lines={[...props.linesOf(row), `${view.x} ${formatFigures(x.data[row] ?? NaN)}, ${view.y} ${formatFigures(y.data[row] ?? NaN)}`]}
            />
          )}
        />
      ) : (
        <Skeleton lines={10} />
      )}
    </Plate>
  );
}

/** Which components are drawn, behind one small button. */
function Axes({ run, view, onView, colourChoice }: Pick<Props, 'run' | 'view' | 'onView' | 'colourChoice'>) {
  const options = Array.from({ length: run.stored }, (_value, i) => ({ value: componentName(i + 1), label: `${componentName(i + 1)}, ${formatShare(run.shares[i] ?? NaN)}: ${shortReading(run, i + 1)}` }));
  const select = (axis: 'x' | 'y', label: string) => <Select label={label} value={view[axis]} options={options} onPick={(value) => onView({ [axis]: value })} />;
  return (
    <Panel
      label="Axes of the biplot"
      align="start"
      trigger={
        <Button size="tiny" kind="bare" icon={ChevronsUpDown} aria-label={`${view.x} × ${view.y}: choose other axes`} className="!px-1">
          {view.x} × {view.y}
        </Button>
      }
    >
      <div className="grid gap-2">
        {select('x', 'Across')}
        {select('y', 'Upwards')}
        {colourChoice}
      </div>
    </Panel>
  );
}

const axisLabel = (run: ComponentRun, name: string): string => {
  const component = componentNumber(name);
  return `${name}, ${formatShare(run.shares[component - 1] ?? NaN)}: ${shortReading(run, component)}`;
};

function scoreTable(frame: Frame, view: BiplotView, x: Float64Array | undefined, y: Float64Array | undefined, { category, categories }: Props) {
  const rows = Array.from({ length: frame.nRows }, (_value, row) => row)
    .filter((row) => Number.isFinite(x?.[row]))
    .map((row) => [frame.holeAt(row), frame.fromM[row] ?? null, frame.toM[row] ?? null, x?.[row] ?? null, y?.[row] ?? null, categories[category?.[row] ?? -1]?.label ?? null]);
  return { columns: ['Hole', 'From, m', 'To, m', view.x, view.y, 'Colour'], rows };
}

const BIPLOT_HELP = {
  text: 'Each point is an interval, placed by its scores; distances between points are log-ratio distances. A ray points to where its element is rich; elements on opposite rays oppose each other.',
  caution: 'Two components show part of the variance only. Points that lie together here may part on a third: change the axes before naming a group.',
  source: 'Aitchison & Greenacre 2002, Biplots of compositional data.',
};
