import type { ComponentRun } from '#contract/components.ts';
import { Scree } from '#src/components/charts/scree.tsx';
import { useFigure } from '#src/components/charts/use-figure.ts';
import { figureExports } from '#src/components/ui/figure-exports.ts';
import { Plate } from '#src/components/ui/plate.tsx';
import { useDeposit } from '#src/lib/use-deposit.ts';

interface Props {
  run: ComponentRun;
  stale: string | null;
}

/** Later components carry next to nothing; the CSV has them all. */
const MOST_BARS = 12;

const HELP = {
  text: 'Share of the variance each component carries, against two answers of chance: the broken stick, and the 95th percentile when every analyte is shuffled by itself (parallel analysis). Components above chance are worth keeping.',
  caution: 'The two rules often disagree, and a small component may still carry the ore. Look at its loadings before leaving it out.',
  source: 'Parallel analysis: Horn 1965. Broken stick: expected pieces of a stick broken at random.',
};

/** How many components are more than chance. */
export function ScreePlate({ run, stale }: Props) {
  const deposit = useDeposit();
  const figure = useFigure();
  const table = {
    caption: 'Share of variance of each component',
    columns: ['Component', 'Eigenvalue', 'Share', 'Broken stick', 'Parallel analysis, 95th percentile'],
    rows: run.shares.map((share, index) => [index + 1, run.eigenvalues[index] ?? '', share, run.brokenStick[index] ?? '', run.parallel95[index] ?? '']),
  };
  return (
    <Plate
      title="Variance"
      qualifier={run.shares.length > MOST_BARS ? `first ${MOST_BARS} of ${run.shares.length} components` : 'by component'}
      stale={stale}
      help={HELP}
      caption={run.suggestion}
      exports={figureExports(figure.drawn, { fileName: `${deposit.name}-scree`, caption: `${run.suggestion} Snapshot ${run.snapshotNumber}`, table: () => table })}
      className="max-lg:h-80"
    >
      <Scree
        chartRef={figure.ref}
        title="Variance by component"
        description={run.suggestion}
        table={table}
        eigenvalues={run.shares.slice(0, MOST_BARS)}
        total={1}
        thresholds={[
          { label: 'broken stick', values: run.brokenStick.slice(0, MOST_BARS) },
          { label: 'parallel, 95 %', values: run.parallel95.slice(0, MOST_BARS) },
        ]}
        keep={run.suggested}
        valueLabel="share"
        height="fill"
      />
    </Plate>
  );
}
