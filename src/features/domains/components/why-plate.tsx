import type { Domain, DomainEvidence } from '#contract/domains.ts';
import { Facts } from '#src/components/layout/selection-card.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { VerdictMark } from '#src/components/ui/verdict-mark.tsx';
import { formatCount, formatFixed, formatGrade, formatMetres, formatShare } from '#src/lib/format.ts';
import { formatWhen } from '#src/lib/format-dates.ts';
import { useDeposit } from '#src/lib/use-deposit.ts';

/** Why this is one domain, in its author's words, with the figures that go with it. */
export function WhyPlate({ domain, evidence }: { domain: Domain; evidence: DomainEvidence | null }) {
  const { payAnalytes } = useDeposit();
  const unitOf = (analyte: string) => payAnalytes.find((pay) => pay.analyte === analyte)?.unit ?? 'ppm';
  const down = evidence ? [
    { term: 'Holes', value: formatCount(evidence.holes) },
    { term: 'Down-hole runs', value: evidence.runs > 0 ? `${formatCount(evidence.runs)}, mean ${formatMetres(evidence.meanRunM)}` : '–' },
    { term: 'Mean membership', value: formatFixed(evidence.meanMembership, 2) },
  ] : [];
  return (
    <Plate title="Why this domain" caption={`${domain.createdBy.name}, ${formatWhen(domain.updatedAt)} · version ${domain.version}`}>
      <p className="font-read text-finding whitespace-pre-line">{domain.rationale}</p>
      <div className="mt-3 grid gap-x-8 gap-y-3 md:grid-cols-2">
        <Facts facts={[{ term: 'Intervals', value: formatCount(domain.intervals) }, { term: 'Length', value: formatMetres(domain.metres) }, ...down]} />
        {evidence && (
          <table className="w-full text-small">
            <caption className="sr-only">Pay grades of the domain</caption>
            <thead className="text-caption text-ink-2">
              <tr><th scope="col" className="text-left font-semibold">Grade</th><th scope="col" className="text-right font-semibold">Mean</th><th scope="col" className="text-right font-semibold">Metal held</th><th scope="col" className="pl-3 text-left font-semibold">Verdict</th></tr>
            </thead>
            <tbody>
              {evidence.grades.map(({ analyte, mean, shareOfMetal, verdict }) => (
                <tr key={analyte} className="border-t border-rule">
                  <th scope="row" className="py-0.5 text-left font-medium">{analyte}</th>
                  <td className="text-right tabular-nums">{mean === null ? '–' : formatGrade(mean, unitOf(analyte))}</td>
                  <td className="text-right tabular-nums">{shareOfMetal === null ? '–' : formatShare(shareOfMetal)}</td>
                  <td className="pl-3"><VerdictMark verdict={verdict} /></td>
                </tr>
              ))}
            </tbody>
          </table>
        )}
      </div>
    </Plate>
  );
}
