import { useMemo } from 'react';
import type { ComponentRun } from '#contract/components.ts';
import { LoadingsBars } from '#src/components/charts/loadings-bars.tsx';
import { useFigure } from '#src/components/charts/use-figure.ts';
import { componentName, componentNumber } from '#src/components/ground/component-words.ts';
import { figureExports } from '#src/components/ui/figure-exports.ts';
import { Plate } from '#src/components/ui/plate.tsx';
import { Select } from '#src/components/ui/select.tsx';
import { formatShare } from '#src/lib/format.ts';
import { useDeposit } from '#src/lib/use-deposit.ts';
import { largeFrom, loadingsOf } from '../model.ts';

interface Props {
  run: ComponentRun;
  pc: string;
  onPc: (pc: string) => void;
  stale: string | null;
}

const HELP = {
  text: 'How strongly each element pulls on the component, richer to the right. Elements at the two ends oppose each other; together they name a mineral or a process. Bars under half the longest are pale.',
  caution: 'The sign of a component is arbitrary. Loadings are of log-ratios: an element is read against the mean of all, never by itself.',
  source: 'Filzmoser, Hron & Reimann 2009, log-ratio principal components.',
};

/** What one component is made of. */
export function LoadingsPlate({ run, pc, onPc, stale }: Props) {
  const deposit = useDeposit();
  const figure = useFigure();
  const component = componentNumber(pc);
  const loadings = useMemo(() => loadingsOf(run, component), [run, component]);
  const reading = run.readings.find((candidate) => candidate.component === component)?.sentence ?? 'not read';
  const of = loadings.length < run.parts.length ? `strongest ${loadings.length} of ${run.parts.length} analytes` : `${run.parts.length} analytes`;
  const caption = `${formatShare(run.shares[component - 1] ?? NaN)} of variance · ${of}`;
  const table = { caption: `Loadings on ${pc}`, columns: ['Analyte', 'Loading'], rows: loadings.map(({ element, value }) => [element, value]) };
  return (
    <Plate
      title="Loadings"
      stale={stale}
      tools={<Select label="Component" isLabelHidden controlSize="tiny" className="w-[4.5rem]" value={pc} options={Array.from({ length: run.stored }, (_value, i) => ({ value: componentName(i + 1), label: componentName(i + 1) }))} onPick={onPc} />}
      help={HELP}
      caption={caption}
      exports={figureExports(figure.drawn, { fileName: `${deposit.name}-loadings-${pc}`, caption: `${pc}: ${reading}. ${caption}. Snapshot ${run.snapshotNumber}`, table: () => table })}
      className="max-lg:h-[30rem] lg:row-span-2"
    >
      <div className="flex h-full min-h-0 flex-col">
        <p className="pb-1 font-read text-small text-ink-2">{reading}</p>
        <div className="min-h-0 flex-1">
          <LoadingsBars chartRef={figure.ref} title={`Loadings on ${pc}`} description={`${pc} sets ${reading}.`} table={table} loadings={loadings} weakBelow={largeFrom(run, component)} axisLabel="clr loading" height="fill" />
        </div>
      </div>
    </Plate>
  );
}
