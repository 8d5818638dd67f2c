import { KernelError } from '#kernels/kernel-error.ts';
import { rankCorrelation } from '#kernels/statistics/rank-correlation.ts';
import { signFlipTest, type SignFlipTest } from '#kernels/statistics/sign-flip.ts';
import type { Category } from '#kernels/tables/category.ts';
import { codeRuns, type CodeRun } from '#kernels/tables/code-runs.ts';
import type { IntervalsByHole } from '#kernels/tables/intervals-by-hole.ts';
import {
  binIndex,
  binsOf,
  contactsByPair,
  rowsNearContacts,
  type ContactBin,
  type ContactRows,
  type PairContact,
} from './contact-bins.ts';
import { CONTACT_RULES, readContact, type ContactReading } from './contact-reading.ts';

export interface ContactOptions {
  /** Composite length, m: the width of a bin. */
  compositeM: number;
  seed: number;
  /** Bins on each side, 10 unless told. */
  bins?: number;
  /** |hole tangent . contact normal| of each row, in (0, 1], where contacts are oriented. */
  obliquity?: Float64Array;
  onProgress?: (share: number) => void;
}

/** Grade across the contacts of two domains. */
export interface ContactProfile extends ContactReading {
  /** Domain codes in the order of levels; distances are negative in the first. */
  first: string;
  second: string;
  /** Contacts found, and those with a grade on both sides. */
  contacts: number;
  contactsUsed: number;
  /** From the far end of the first domain to the far end of the second. */
  bins: ContactBin[];
  /** Mean grades of the two composites next to each contact. */
  nearMeans: { first: number; second: number } | null;
  /** Mean over contacts of ln grade of the first less the second; exp of it is a ratio. */
  test: SignFlipTest | null;
  /** Spearman's correlation of grade and distance inside the five bins of each side. */
  trend: { first: number | null; second: number | null };
}

/**
 * Contact profiles of every pair of domains that touch. Distances run along the hole (times the
 * obliquity) to the nearest contact of the pair that bounds the composite's run.
 *
 * The test counts contacts, not composites: each gives one difference of mean ln grade between the two
 * composites next to it on either side.
 *
 * @param intervals Composites in order down each hole; `isBreakBefore` marks faults.
 * @param domains A domain of each composite, or NOT_LOGGED.
 * @param values n grades > 0; NaN where missing.
 * @returns Pairs with most contacts first.
 * @throws {KernelError} `shape`; `bad-interval`; `overlap`; `bad-parameter`; `not-positive` with { row }.
 * @see Larrondo & Deutsch (2004); Ortiz & Emery (2006) on hard and soft boundaries (from memory).
 */
export function contactProfiles(
  intervals: IntervalsByHole,
  domains: Category,
  values: Float64Array,
  options: ContactOptions,
): ContactProfile[] {
  const runs = codeRuns(intervals, domains);
  requireInput(values, intervals.fromM.length, options);
  const centreM = intervals.fromM.map((from, row) => (from + intervals.toM[row]!) / 2);
  const pairs = contactsByPair(runs, intervals, domains.levels.length);
  return [...pairs]
    .sort(([a, x], [b, y]) => y.length - x.length || a - b)
    .map(([key, contacts], i) => {
      const codes: [number, number] = [
        Math.floor(key / domains.levels.length),
        key % domains.levels.length,
      ];
      const profile = profileOf(contacts, values, centreM, {
        ...options,
        seed: options.seed + key,
      });
      options.onProgress?.((i + 1) / pairs.size);
      return { first: domains.levels[codes[0]]!, second: domains.levels[codes[1]]!, ...profile };
    });
}

function requireInput(
  values: Float64Array,
  n: number,
  { compositeM, bins = 10, obliquity }: ContactOptions,
): void {
  if (values.length !== n || (obliquity && obliquity.length !== n))
    throw new KernelError(
      'shape',
      `expected ${n} grades (and obliquities), found ${values.length}`,
    );
  if (!(compositeM > 0 && compositeM < Infinity && Number.isInteger(bins) && bins >= 1))
    throw new KernelError(
      'bad-parameter',
      `expected a composite length > 0 m and bins >= 1, found ${compositeM}, ${bins}`,
    );
  const slant = obliquity?.findIndex((value) => !(value > 0 && value <= 1)) ?? -1;
  if (slant >= 0)
    throw new KernelError(
      'bad-parameter',
      `expected an obliquity in (0, 1], found ${obliquity?.[slant]} in row ${slant}`,
      { row: slant },
    );
  const row = values.findIndex(
    (value) => !(Number.isNaN(value) || (value > 0 && value < Infinity)),
  );
  if (row >= 0)
    throw new KernelError(
      'not-positive',
      `expected a grade > 0, found ${values[row]} in row ${row}`,
      {
        row,
      },
    );
}

function profileOf(
  contacts: PairContact[],
  values: Float64Array,
  centreM: Float64Array,
  { compositeM, bins = 10, obliquity, seed }: ContactOptions,
): Omit<ContactProfile, 'first' | 'second'> {
  const near = (side: 'first' | 'second') => rowsNearContacts(contacts, side, centreM, obliquity);
  const rows = { first: near('first'), second: near('second') };
  const sides = contacts.map((contact) => ({
    first: nextToContact(contact.first, contact.isFirstAbove, values),
    second: nextToContact(contact.second, !contact.isFirstAbove, values),
  }));
  const used = sides.filter(({ first, second }) => first.length > 0 && second.length > 0);
  const differences = Float64Array.from(
    used,
    ({ first, second }) => meanOf(first.map(Math.log)) - meanOf(second.map(Math.log)),
  );
  const test = used.length === 0 ? null : signFlipTest(differences, { seed });
  const nearMeans =
    used.length === 0
      ? null
      : {
          first: meanOf(used.flatMap(({ first }) => first)),
          second: meanOf(used.flatMap(({ second }) => second)),
        };
  const trend = {
    first: trendOf(rows.first, values, compositeM),
    second: trendOf(rows.second, values, compositeM),
  };
  return {
    contacts: contacts.length,
    contactsUsed: used.length,
    bins: [
      ...binsOf(rows.first, values, 'first', compositeM, bins).reverse(),
      ...binsOf(rows.second, values, 'second', compositeM, bins),
    ],
    nearMeans,
    test,
    trend,
    ...readContact({ contacts: used.length, nearMeans, test, trend }),
  };
}

/** Spearman's correlation of grade and distance in the bins next to the contact. */
function trendOf(
  rows: ContactRows['rows'],
  values: Float64Array,
  compositeM: number,
): number | null {
  const inside = rows.filter(
    ({ row, distanceM }) =>
      !Number.isNaN(values[row]) && binIndex(distanceM, compositeM) < CONTACT_RULES.trendBins,
  );
  if (inside.length < 3) return null;
  return rankCorrelation(
    Float64Array.from(inside, ({ distanceM }) => distanceM),
    Float64Array.from(inside, ({ row }) => values[row]!),
  );
}

/** Grades of the two rows of a run next to its contact; fewer where missing. */
function nextToContact(run: CodeRun, isAbove: boolean, values: Float64Array): number[] {
  const rows = isAbove ? [run.last, run.last - 1] : [run.first, run.first + 1];
  return rows
    .filter((row) => row >= run.first && row <= run.last)
    .map((row) => values[row]!)
    .filter((value) => !Number.isNaN(value));
}

const meanOf = (values: readonly number[]): number =>
  values.reduce((sum, value) => sum + value, 0) / values.length;
