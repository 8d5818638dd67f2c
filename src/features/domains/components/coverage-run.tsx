import type { DomainList } from '#contract/domains.ts';
import { CategoryMark } from '#src/components/charts/category-marks.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { ShareBar } from '#src/components/ui/run.tsx';
import { formatMetres, formatShare } from '#src/lib/format.ts';

/** All metres as one run of core, laid out by domain; what has no domain is hatched. */
export function CoverageRun({ list }: { list: DomainList }) {
  const { domains, unassigned, total } = list;
  const shareOf = (metres: number): number => (total.metres > 0 ? metres / total.metres : 0);
  const parts = [
    ...domains.map(({ code, slot, metres }) => ({ label: code, share: shareOf(metres), fill: `var(--c${((slot - 1) % 8) + 1})` })),
    { label: 'UNASSIGNED', share: shareOf(unassigned.metres), look: 'hatch' as const },
  ];
  return (
    <Plate title="Every interval has one code" qualifier={`${formatMetres(total.metres)} in all`}>
      <ShareBar label="Metres by domain" parts={parts} heightPx={22} />
      <ul className="mt-2 flex flex-wrap gap-x-5 gap-y-1 text-small">
        {domains.map(({ id, code, slot, metres }) => (
          <li key={id} className="flex items-center gap-1.5">
            <CategoryMark slot={slot} size={11} />
            <span className="font-mono text-caption">{code}</span>
            <span className="text-ink-2">{formatShare(shareOf(metres))}</span>
          </li>
        ))}
        {unassigned.intervals > 0 && <li className="text-ink-2"><span className="font-mono text-caption">UNASSIGNED</span> {formatShare(shareOf(unassigned.metres))}</li>}
      </ul>
    </Plate>
  );
}
