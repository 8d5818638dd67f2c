import { useQuery } from '@tanstack/react-query';
import { useMemo, useRef } from 'react';
import type { CellDetail, Screen, Subset } from '#contract/screens.ts';
import { Histogram } from '#src/components/charts/histogram.tsx';
import { ProbabilityPlot } from '#src/components/charts/probability-plot.tsx';
import type { ChartHandle } from '#src/components/charts/chart-types.ts';
import { Facts } from '#src/components/layout/selection-card.tsx';
import { useFigureExports } from '#src/components/ui/figure-exports.ts';
import { Skeleton } from '#src/components/ui/loading.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Segmented } from '#src/components/ui/segmented.tsx';
import { VerdictMark } from '#src/components/ui/verdict-mark.tsx';
import { formatCount, formatFigures, formatGrade, formatMetres, gradeIn } from '#src/lib/format.ts';
import { useDeposit } from '#src/lib/use-deposit.ts';
import { cellQuery } from '../api/populations-queries.ts';
import { cellFacts, chosenFit, componentWords, drawnComponents, unitOf } from '../model.ts';
import type { SubsetValues } from '../subset-values.ts';

export type CellView = 'probability' | 'histogram';
const VIEWS: { value: CellView; label: string }[] = [
  { value: 'probability', label: 'Probability' },
  { value: 'histogram', label: 'Histogram' },
];

interface Props {
  screen: Screen;
  subset: Subset;
  variable: string;
  values: SubsetValues | null;
  /** Its snapshot is the current one, so that its values can be read. */
  isDrawn: boolean;
  view: CellView;
  onView: (view: CellView) => void;
}

const HELP = {
  text: 'One lognormal population is a straight line on this plot; a bend is a second one. Populations are fitted to ln grade by expectation–maximisation; the number is the one with the lowest BIC.',
  caution: 'A bend can be a campaign, a limit or a contact as well as geology. Look at the core before splitting.',
  source: 'Sinclair 1976; Hartigan and Hartigan 1985; Fraley and Raftery 2002',
};

function captionOf(cell: CellDetail, { snapshotNumber, support }: Screen): string {
  const metres = support === 'drill' ? `, ${formatMetres(cell.metres)}, length-weighted` : ', each sample counts once';
  const gain = cell.deltaBic === null ? '' : ` · ΔBIC ${formatFigures(cell.deltaBic, 3)} for two over one`;
  const cv = cell.cv === null ? '' : ` · CV ${formatFigures(cell.cv, 3)}`;
  return `n = ${formatCount(cell.n)}${metres} · lognormal mixture by EM${gain}${cv} · snapshot ${snapshotNumber}`;
}

/** One cell of the matrix drawn large, with the reasons of its verdict. */
export function CellPlate({ screen, subset, variable, values, isDrawn, view, onView }: Props) {
  const { id: depositId, payAnalytes } = useDeposit();
  const { data: cell, error, refetch } = useQuery(cellQuery(depositId, screen.id, subset.key, variable));
  const chartRef = useRef<ChartHandle>(null);
  const unit = unitOf(variable, payAnalytes);
  const grades = useMemo(() => values?.ppm.map((ppm) => gradeIn(ppm, unit)) ?? null, [values, unit]);
  const caption = cell ? captionOf(cell, screen) : undefined;
  const title = `${variable} in ${subset.label}`;
  const exports = useFigureExports(chartRef, {
    fileName: `${variable}-${subset.label}`,
    caption: caption ?? '',
    table: () => ({ columns: [`${variable} ${unit}`], rows: Array.from(grades ?? [], (grade) => [grade]) }),
  });
  return (
    <Plate
      title={title}
      tools={<>{cell && <VerdictMark verdict={cell.verdict} />}<Segmented label="View" segments={VIEWS} value={view} onPick={onView} size="tiny" /></>}
      help={HELP}
      caption={caption}
      stale={screen.isStale && `on snapshot ${screen.snapshotNumber}`}
      error={cell ? undefined : error}
      onRetry={() => void refetch()}
      exports={exports}
    >
      {!cell || (!grades && isDrawn) ? <Skeleton lines={9} /> : (
        <>
          {grades ? <CellDrawing cell={cell} grades={grades} weights={values?.weights ?? null} belowShare={values?.belowShare ?? 0} slot={subset.slot} unit={unit} view={view} title={title} chartRef={chartRef} /> : <p className="py-6 text-center text-ink-2">The tables have changed since this screen ran: screen again to draw its cells.</p>}
          <Reasons cell={cell} unit={unit} />
        </>
      )}
    </Plate>
  );
}

interface DrawingProps {
  cell: CellDetail;
  grades: Float64Array;
  weights: Float64Array | null;
  belowShare: number;
  slot: number | null;
  unit: ReturnType<typeof unitOf>;
  view: CellView;
  title: string;
  chartRef: React.RefObject<ChartHandle | null>;
}

function CellDrawing({ cell, grades, weights, belowShare, slot, unit, view, title, chartRef }: DrawingProps) {
  const fit = chosenFit(cell);
  const components = useMemo(() => (fit && fit.k > 1 ? drawnComponents(fit, unit) : []), [fit, unit]);
  const words = fit && fit.k > 1 ? componentWords(fit, unit, cell.variable) : [];
  const description = `${cell.n} values, verdict ${cell.verdict}. ${cell.reasons.join(' ')}`;
  const shared = { title, description, values: grades, ...(weights ? { weights } : {}), valueLabel: `${cell.variable}, ${unit} (log scale)`, slot, components, componentWords: words, height: 300, chartRef };
  if (grades.length < 3) return <p className="py-8 text-center text-ink-2">Fewer than three values above detection: there is nothing to draw.</p>;
  if (view === 'histogram') return <Histogram {...shared} kind="log" />;
  const evenOdds = cell.evenOddsPpm === null ? null : { value: gradeIn(cell.evenOddsPpm, unit), label: `even odds at ${formatGrade(cell.evenOddsPpm, unit)} ${cell.variable}` };
  const censored = belowShare > 0 ? { share: belowShare, label: 'below detection' } : null;
  return <ProbabilityPlot {...shared} sumWord={words.length > 1 ? 'together' : undefined} evenOdds={evenOdds} censored={censored} />;
}

function Reasons({ cell, unit }: { cell: CellDetail; unit: ReturnType<typeof unitOf> }) {
  return (
    <div className="mt-2 grid gap-x-6 gap-y-2 md:grid-cols-2">
      <div>
        <h3 className="text-caption font-semibold text-ink-2">Why {cell.verdict === 'too-few' ? 'too few' : cell.verdict}</h3>
        <ul className="mt-0.5 list-disc pl-4 text-small">
          {[...cell.reasons, ...cell.notes].map((reason) => <li key={reason}>{reason}</li>)}
        </ul>
      </div>
      <Facts facts={cellFacts(cell, unit)} />
    </div>
  );
}
