import { useMemo } from 'react';
import type { ComponentRun } from '#contract/components.ts';
import type { Grouping } from '#contract/groupings.ts';
import { FingerprintHeat } from '#src/components/charts/fingerprint-heat.tsx';
import { useFigure } from '#src/components/charts/use-figure.ts';
import { figureExports } from '#src/components/ui/figure-exports.ts';
import { Plate } from '#src/components/ui/plate.tsx';
import { countOf } from '#src/lib/format.ts';
import { useDeposit } from '#src/lib/use-deposit.ts';
import { partOrder } from '../model.ts';

interface Props {
  grouping: Grouping;
  run: ComponentRun | null;
  stale: string | null;
  onGroup: (label: number) => void;
  selectedLabel: number | null;
}

const HELP = {
  text: 'Median centred log-ratio of each group less the median of all rows: green is richer than the whole, brown poorer, against the mean of all analytes of the suite. A press on a group takes its intervals; a press on an element orders the groups.',
  caution: 'A log-ratio is relative: an element may look poor because others are rich. Judge a mineral by several elements together.',
  source: 'Centred log-ratio: Aitchison 1986. Colours after ColorBrewer BrBG.',
};

/** What makes each group: its clr medians against the whole. */
export function FingerprintPlate({ grouping, run, stale, onGroup, selectedLabel }: Props) {
  const deposit = useDeposit();
  const chart = useFigure();
  const { groups, fingerprints } = grouping;
  const { elements, values } = useMemo(() => {
    const order = partOrder(fingerprints.parts, run);
    return {
      elements: order.map((index) => fingerprints.parts[index] ?? ''),
      values: groups.map((group) => order.map((index) => fingerprints.values[group.label - 1]?.[index] ?? NaN)),
    };
  }, [groups, fingerprints, run]);
  const categories = groups.map(({ name, slot }) => ({ label: name, slot }));
  const table = { caption: 'Clr medians of the groups less those of all', columns: ['Group', ...elements], rows: groups.map(({ name }, index) => [name, ...(values[index] ?? [])]) };
  const caption = `clr medians less those of all, centre 0 · n = ${countOf(grouping.n, 'row')} · snapshot ${grouping.snapshotNumber}`;
  const selected = groups.findIndex(({ label }) => label === selectedLabel);
  return (
    <Plate
      title="Fingerprints"
      qualifier={caption}
      stale={stale}
      help={HELP}
      exports={figureExports(chart.drawn, { fileName: `${deposit.name}-fingerprints`, caption, table: () => table })}
    >
      <FingerprintHeat
        chartRef={chart.ref}
        title="Fingerprints of the groups"
        description={`Clr medians of ${countOf(groups.length, 'group')} over ${countOf(elements.length, 'analyte')}, less the medians of all rows.`}
        table={table}
        groups={categories}
        elements={elements}
        values={values}
        selectedGroup={selected < 0 ? null : selected}
        onGroup={(index) => {
          const group = groups[index];
          if (group !== undefined) onGroup(group.label);
        }}
      />
    </Plate>
  );
}
