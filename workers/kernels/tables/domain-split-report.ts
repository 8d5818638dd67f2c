import { KernelError } from '#kernels/kernel-error.ts';
import { entropy } from './association.ts';
import { checkCategory, NOT_LOGGED, type Category } from './category.ts';
import { energyTest, type EnergyTest } from './energy-distance.ts';
import { checkHoleStarts } from './hole-shift.ts';

/** Lithology inside one candidate domain. */
export interface DomainSplit {
  domain: string;
  metres: number;
  /** Largest share first; metres that are not logged are left out of the shares. */
  lithologies: { lithology: string; metres: number; share: number }[];
  notLoggedMetres: number;
  /** Of the shares, nats. */
  entropy: number;
  /** The two rocks that each hold a quarter of the length or more, and whether their chemistry differs. */
  twoRocks: { first: string; second: string; test: EnergyTest } | null;
  proposesSplit: boolean;
}

/** Two domains of one dominant rock that lie close in chemistry. */
export interface MergeProposal {
  first: string;
  second: string;
  lithology: string;
  /** Distance of their centres, and the pooled spread about the centres it is less than. */
  distance: number;
  withinSd: number;
}

export interface SplitReport {
  domains: DomainSplit[];
  merges: MergeProposal[];
}

/** Limits of the proposals (project rule). */
export const SPLIT_RULES = { share: 0.25, p: 0.05 } as const;

export interface SplitReportInput {
  domains: Category;
  lithology: Category;
  lengthsM: Float64Array;
  /** Isometric log-ratio coordinates (or component scores) of n composites, finite. */
  coordinates: readonly Float64Array[];
  holeStarts: Int32Array;
}

/**
 * How candidate domains divide by lithology. A domain with two rocks of a quarter of its length each
 * and different chemistry is proposed for splitting; two domains of one dominant rock whose centres lie
 * closer than the spread about them are proposed for merging. Proposals, never decisions.
 *
 * @throws {KernelError} `shape`; `bad-parameter` at a code without level or a length < 0; `not-finite`.
 */
export function domainSplitReport(
  input: SplitReportInput,
  options: { seed: number; draws?: number; onProgress?: (share: number) => void },
): SplitReport {
  requireInput(input);
  const { levels } = input.domains;
  const domains = levels.map((domain, code) => {
    const found = splitOf(input, code, domain, options);
    options.onProgress?.((code + 1) / levels.length);
    return found;
  });
  return { domains, merges: mergesOf(input, domains) };
}

function requireInput({
  domains,
  lithology,
  lengthsM,
  coordinates,
  holeStarts,
}: SplitReportInput): void {
  const n = checkHoleStarts(holeStarts);
  checkCategory(domains, n, 'domain');
  checkCategory(lithology, n, 'lithology');
  if (lengthsM.length !== n || coordinates.length === 0 || coordinates.some((c) => c.length !== n))
    throw new KernelError('shape', `expected ${n} lengths and rows of every coordinate`);
  const row = lengthsM.findIndex((length) => !(length >= 0 && length < Infinity));
  if (row >= 0)
    throw new KernelError(
      'bad-parameter',
      `expected a length >= 0 m, found ${lengthsM[row]} in row ${row}`,
      { row },
    );
  coordinates.forEach((column, col) => {
    const bad = column.findIndex((value) => !Number.isFinite(value));
    if (bad >= 0)
      throw new KernelError(
        'not-finite',
        `expected finite coordinates, found ${column[bad]} in row ${bad}`,
        {
          row: bad,
          col,
        },
      );
  });
}

function splitOf(
  input: SplitReportInput,
  code: number,
  domain: string,
  options: { seed: number; draws?: number },
): DomainSplit {
  const { domains, lithology, lengthsM } = input;
  const metresOf = new Float64Array(lithology.levels.length);
  let notLoggedMetres = 0;
  domains.codes.forEach((own, row) => {
    if (own !== code) return;
    const rock = lithology.codes[row]!;
    if (rock === NOT_LOGGED) notLoggedMetres += lengthsM[row]!;
    else metresOf[rock]! += lengthsM[row]!;
  });
  const logged = metresOf.reduce((sum, metres) => sum + metres, 0);
  const ranked = [...metresOf.keys()]
    .filter((rock) => metresOf[rock]! > 0)
    .sort((a, b) => metresOf[b]! - metresOf[a]! || a - b);
  const large = ranked.filter((rock) => metresOf[rock]! >= SPLIT_RULES.share * logged);
  const twoRocks = testTwoRocks(input, code, large, options);
  return {
    domain,
    metres: logged + notLoggedMetres,
    lithologies: ranked.map((rock) => ({
      lithology: lithology.levels[rock]!,
      metres: metresOf[rock]!,
      share: metresOf[rock]! / logged,
    })),
    notLoggedMetres,
    entropy: logged > 0 ? entropy(metresOf) : 0,
    twoRocks,
    proposesSplit: twoRocks !== null && twoRocks.test.p <= SPLIT_RULES.p,
  };
}

/** Chemistry of the two largest rocks of a domain; null when fewer than two are large. */
function testTwoRocks(
  { domains, lithology, coordinates, holeStarts }: SplitReportInput,
  code: number,
  [first, second]: readonly number[],
  { seed, draws }: { seed: number; draws?: number },
): DomainSplit['twoRocks'] {
  if (first === undefined || second === undefined) return null;
  const isFirst = Int8Array.from(domains.codes, (own, row) => {
    const rock = lithology.codes[row];
    if (own !== code || (rock !== first && rock !== second)) return -1;
    return rock === first ? 1 : 0;
  });
  const options = { seed: seed + code, ...(draws === undefined ? {} : { draws }) };
  return {
    first: lithology.levels[first]!,
    second: lithology.levels[second]!,
    test: energyTest(coordinates, isFirst, holeStarts, options),
  };
}

function mergesOf(
  { domains, coordinates }: SplitReportInput,
  splits: readonly DomainSplit[],
): MergeProposal[] {
  const groups = domains.levels.map((_, code) =>
    [...domains.codes.keys()].filter((row) => domains.codes[row] === code),
  );
  const centres = groups.map((rows) => coordinates.map((column) => meanOf(column, rows)));
  const squares = groups.map((rows, code) =>
    coordinates.reduce(
      (sum, column, k) =>
        sum + rows.reduce((s, row) => s + (column[row]! - centres[code]![k]!) ** 2, 0),
      0,
    ),
  );
  return splits.flatMap((a, i) =>
    splits.slice(i + 1).flatMap((b, offset): MergeProposal[] => {
      const j = i + 1 + offset;
      const [rock, other] = [a.lithologies[0]?.lithology, b.lithologies[0]?.lithology];
      const freedom = groups[i]!.length + groups[j]!.length - 2;
      if (rock === undefined || rock !== other || freedom < 1) return [];
      const withinSd = Math.sqrt((squares[i]! + squares[j]!) / freedom);
      const distance = Math.hypot(...centres[i]!.map((value, k) => value - centres[j]![k]!));
      return distance < withinSd
        ? [{ first: a.domain, second: b.domain, lithology: rock, distance, withinSd }]
        : [];
    }),
  );
}

const meanOf = (column: Float64Array, rows: readonly number[]): number =>
  rows.reduce((sum, row) => sum + column[row]! / rows.length, 0);
