import { useMemo, useRef, useState } from 'react';
import type { Domain, DomainEvidence, PopulationPart } from '#contract/domains.ts';
import type { GradeUnit } from '#contract/deposits.ts';
import type { ChartHandle } from '#src/components/charts/chart-types.ts';
import { DensityRidges } from '#src/components/charts/density-ridges.tsx';
import { useFigureExports } from '#src/components/ui/figure-exports.ts';
import { Plate } from '#src/components/ui/plate.tsx';
import { Select } from '#src/components/ui/select.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { VERDICT_WORDS, VerdictMark } from '#src/components/ui/verdict-mark.tsx';
import { formatCount, formatFigures, formatGrade, gradeIn } from '#src/lib/format.ts';
import { useDeposit } from '#src/lib/use-deposit.ts';
import { categoryName, partsBefore, splitsOf } from '../model.ts';

const HELP = {
  text: 'The pay grade in all intervals, in the domain, and in each part of it by the chosen category. A split that leaves one population in each part is worth a domain of its own.',
  caution: 'A split that only lowers the variance is not a domain. Say what the rock did before using one.',
  source: 'Kernel density of ln grade, normal-reference bandwidth',
};

const ROLES: Record<PopulationPart['role'], string> = { before: 'before: ', domain: 'domain ', part: 'after: ' };

function columnsFor(unit: GradeUnit): Column<PopulationPart>[] {
  const grade = (ppm: number | null): string => (ppm === null ? '–' : formatGrade(ppm, unit));
  return [
    { header: 'Part', rowHeader: true, value: ({ label }) => label, cell: ({ label, role }) => `${ROLES[role]}${label}` },
    { header: 'n', align: 'right', value: ({ n }) => n, cell: ({ n }) => formatCount(n) },
    { header: 'Median', align: 'right', value: ({ median }) => median, cell: ({ median }) => grade(median) },
    { header: 'CV', align: 'right', value: ({ cv }) => cv, cell: ({ cv }) => (cv === null ? '–' : formatFigures(cv, 2)) },
    { header: 'Verdict', value: ({ verdict }) => verdict, cell: ({ verdict }) => <VerdictMark verdict={verdict} /> },
  ];
}

/** One pay grade before the domain, in it, and in its parts. */
export function BeforeAfterPlate({ evidence, domain }: { evidence: DomainEvidence; domain: Domain }) {
  const { payAnalytes } = useDeposit();
  const variables = [...new Set(evidence.populations.map(({ variable }) => variable))];
  const [pickedVariable, setVariable] = useState('');
  const variable = variables.includes(pickedVariable) ? pickedVariable : (evidence.grades.find(({ verdict }) => verdict === 'mixed')?.analyte ?? variables[0] ?? '');
  const splits = splitsOf(evidence.populations, variable);
  const [pickedSplit, setSplit] = useState('');
  const split = splits.includes(pickedSplit) ? pickedSplit : (splits[0] ?? null);
  const chartRef = useRef<ChartHandle>(null);
  const unit = payAnalytes.find(({ analyte }) => analyte === variable)?.unit ?? 'ppm';
  const parts = partsBefore(evidence.populations, variable, split);
  const columns = useMemo(() => columnsFor(unit), [unit]);
  const ridges = parts.map(({ label, role, n, verdict, density }) => {
    const at = density?.ppm.map((ppm) => gradeIn(ppm, unit)) ?? [];
    return { label: `${ROLES[role]}${label}`, note: `n = ${formatCount(n)}, ${VERDICT_WORDS[verdict]}`, slot: role === 'domain' ? domain.slot : null, values: at, ...(density ? { curve: { at, height: density.height } } : {}) };
  });
  const caption = `Kernel density of ln ${variable}, each of one height; n in intervals · snapshot ${evidence.snapshotNumber}`;
  const exports = useFigureExports(chartRef, { fileName: `${variable}-before-after`, caption });
  if (variables.length === 0) return null;
  const tools = (
    <>
      <Select label="Grade" isLabelHidden controlSize="tiny" options={variables.map((value) => ({ value, label: value }))} value={variable} onPick={setVariable} />
      {splits.length > 0 && <Select label="Split by" isLabelHidden controlSize="tiny" options={splits.map((value) => ({ value, label: `by ${categoryName(value).replace(/^[A-Z]/, (letter) => letter.toLowerCase())}` }))} value={split ?? ''} onPick={setSplit} />}
    </>
  );
  return (
    <Plate title="Before and after the split" tools={tools} help={HELP} caption={caption} exports={exports}>
      <DensityRidges title={`${variable} before and after`} description={parts.map(({ label, verdict }) => `${label} ${VERDICT_WORDS[verdict]}`).join('; ')} ridges={ridges} kind="log" valueLabel={`${variable}, ${unit} (log scale)`} chartRef={chartRef} />
      <Table caption={`${variable} in each part`} columns={columns} rows={parts} rowKey={({ subsetKey }) => subsetKey} isDense />
    </Plate>
  );
}
