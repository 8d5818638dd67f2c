import type { DomainEvidence, PopulationPart } from '#contract/domains.ts';

type Found = Pick<DomainEvidence, 'populations' | 'splits' | 'grades'>;

const words = (category: string): string => (category.startsWith('side of ') ? `the side of ${category.slice('side of '.length)}` : category === 'lithology' ? 'logged rock' : category);

/** The split whose parts all hold one population, when the whole domain does not; the fewest parts first. */
function resolvingSplit(populations: readonly PopulationPart[], variable: string): string | null {
  const parts = populations.filter((part) => part.variable === variable && part.role === 'part');
  const bySplit = new Map<string, PopulationPart[]>();
  for (const part of parts) if (part.splitBy) bySplit.set(part.splitBy, [...(bySplit.get(part.splitBy) ?? []), part]);
  const resolved = [...bySplit].filter(([, own]) => own.length > 1 && own.every(({ verdict }) => verdict === 'single'));
  return resolved.sort(([, a], [, b]) => a.length - b.length)[0]?.[0] ?? null;
}

/** One or two sentences: is each pay grade one population here, and if not, what parts it. */
export function evidenceFinding({ populations, splits, grades }: Found): string {
  const judged = grades.filter(({ verdict }) => verdict !== 'too-few');
  const mixed = judged.filter(({ verdict }) => verdict === 'mixed');
  const strongest = splits.filter(({ cramersVCorrected }) => cramersVCorrected !== null).sort((a, b) => (b.cramersVCorrected ?? 0) - (a.cramersVCorrected ?? 0))[0];
  const follows = strongest && (strongest.cramersVCorrected ?? 0) >= 0.3 ? ` The domain follows ${words(strongest.category)} (V ${strongest.cramersVCorrected?.toFixed(2)}).` : ' It follows no logged category strongly.';
  if (judged.length === 0) return `Too few grades to judge populations.${follows}`;
  const [first] = mixed;
  if (!first) {
    const suspect = judged.filter(({ verdict }) => verdict === 'suspect').map(({ analyte }) => analyte);
    return suspect.length === 0 ? `Each pay grade is one population.${follows}` : `No pay grade is mixed; ${suspect.join(', ')} ${suspect.length === 1 ? 'is' : 'are'} suspect.${follows}`;
  }
  const split = resolvingSplit(populations, first.analyte);
  return split ? `${first.analyte} is mixed here, and one population on each part by ${words(split)}.${follows}` : `${first.analyte} is mixed here, and no logged split resolves it.${follows}`;
}
