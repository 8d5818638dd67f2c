import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import type { CategorySplit, DomainEvidence } from '#contract/domains.ts';
import { ShareRun } from '#src/components/charts/share-run.tsx';
import { assignPatterns, type RockPattern } from '#src/components/charts/rock-patterns.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { tableExports } from '#src/components/ui/table/table-tools.tsx';
import { snapshotQuery } from '#src/lib/deposit-queries.ts';
import { countOf, formatMetres } from '#src/lib/format.ts';
import { useDepositId } from '#src/lib/use-deposit.ts';
import { categoryName, testWords } from '../model.ts';

interface Row {
  category: string;
  level: string;
  metres: number;
  share: number;
  shareElsewhere: number;
  adjustedResidual: number | null;
}

const EXPORTED: Column<Row>[] = [
  { header: 'Category', value: ({ category }) => category, cell: ({ category }) => category, rowHeader: true },
  { header: 'Level', value: ({ level }) => level, cell: ({ level }) => level },
  { header: 'Metres', value: ({ metres }) => metres, cell: ({ metres }) => metres },
  { header: 'Share', value: ({ share }) => share, cell: ({ share }) => share },
  { header: 'Share elsewhere', value: ({ shareElsewhere }) => shareElsewhere, cell: ({ shareElsewhere }) => shareElsewhere },
  { header: 'Adjusted residual', value: ({ adjustedResidual }) => adjustedResidual, cell: ({ adjustedResidual }) => adjustedResidual },
];

const HELP = {
  text: 'Shares are by metres. The test asks whether the domain and all other intervals divide alike: chi-square on counts of intervals, with the bias-corrected Cramér V as its strength. p comes from shifting labels round within each hole.',
  caution: 'With thousands of intervals any difference is significant: read V and the shares. ● marks a level that is over- or under-represented by more than three adjusted residuals.',
  source: 'Bergsma 2013; Haberman 1973',
};
const SHOWN = 6;

/** What the domain is made of: its metres by rock, weathering and side of each fault, against elsewhere. */
export function SplitsPlate({ evidence }: { evidence: DomainEvidence }) {
  const { data: answer } = useQuery(snapshotQuery(useDepositId()));
  const patterns = useMemo(() => assignPatterns((answer?.snapshot?.lithologies ?? []).map(({ code }) => code)), [answer]);
  const rows = useMemo(() => evidence.splits.flatMap(({ category, levels }) => levels.map((level): Row => ({ category, ...level }))), [evidence]);
  return (
    <Plate title="What the domain is made of" qualifier={`${countOf(evidence.intervals, 'interval')}, ${formatMetres(evidence.metres)}`} help={HELP} exports={tableExports('domain-splits', EXPORTED, rows)} caption={`Shares by metres, tests by intervals · ● more or less common here than elsewhere · snapshot ${evidence.snapshotNumber}`}>
      <div className="grid gap-x-6 gap-y-4 md:grid-cols-2 lg:grid-cols-4">
        {evidence.splits.map((split) => <Split key={split.category} split={split} patterns={patterns} />)}
      </div>
    </Plate>
  );
}

function Split({ split, patterns }: { split: CategorySplit; patterns: ReadonlyMap<string, RockPattern | null> }) {
  const { category, levels, notLogged } = split;
  const name = categoryName(category);
  const shown = levels.filter(({ share }) => share > 0).slice(0, SHOWN);
  const hidden = levels.filter(({ share }) => share > 0).length - shown.length;
  const marked = (level: (typeof levels)[number]): string => (Math.abs(level.adjustedResidual ?? 0) > 3 ? `${level.level} ●` : level.level);
  const parts = shown.map((level) => ({ label: marked(level), share: level.share, pattern: category === 'lithology' ? (patterns.get(level.level) ?? null) : null }));
  return (
    <section>
      <h3 className="mb-1 text-caption font-semibold text-ink-2">{name}</h3>
      <ShareRun title={`${name} of the domain`} description={shown.map(({ level, share, shareElsewhere }) => `${level} ${Math.round(share * 100)} %, elsewhere ${Math.round(shareElsewhere * 100)} %`).join('; ')} parts={parts} layout="bars" height={Math.max(40, parts.length * 21)} />
      <p className="mt-1 text-caption text-ink-2">{testWords(split)}</p>
      {hidden > 0 && <p className="text-caption text-ink-3">and {countOf(hidden, 'smaller level')}: all in the CSV</p>}
      {notLogged.intervals > 0 && <p className="text-caption text-ink-3">{formatMetres(notLogged.metres)} not logged</p>}
    </section>
  );
}
