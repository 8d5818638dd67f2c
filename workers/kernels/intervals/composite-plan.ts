import { KernelError } from '#kernels/kernel-error.ts';
import { checkIntervalsByHole, type IntervalsByHole } from '#kernels/tables/intervals-by-hole.ts';
import { compositeBreaks, type CompositeRules } from './composite-breaks.ts';
import { LOGGING_TOLERANCE_M } from './interval-table.ts';

/** No domain: the interval joins no composite. */
export const NO_DOMAIN = -1;

/** Composites of several holes and which length of which interval each one holds. */
export interface CompositePlan {
  /** First composite of each hole, then the number of composites. */
  holeStarts: Int32Array;
  fromM: Float64Array;
  toM: Float64Array;
  domain: Int32Array;
  /** 1 where a composite is shorter than the least share of the wanted length. */
  isShort: Uint8Array;
  /** Pieces in order of depth: source row, its composite (-1 = none) and their shared length (m). */
  pieceRow: Int32Array;
  pieceComposite: Int32Array;
  pieceM: Float64Array;
  /** Ends of runs that the residual rule threw away. */
  discarded: { count: number; lengthM: number };
  /** Length of the intervals without a domain. */
  withoutDomainM: number;
}

/** Touching intervals of one domain, as rows and effective depths. */
interface DomainRun {
  rows: number[];
  fromM: number;
  toM: number;
}

/**
 * Lays composites over intervals, hole by hole and domain by domain: a change of domain, a break and
 * a gap always cut. Ends closer than half a centimetre are taken as touching, at the upper one's end.
 * Metres are conserved: composites, discarded ends and intervals without a domain add up to all.
 *
 * @param intervals Intervals in order down each hole.
 * @param domain Code of each interval; `NO_DOMAIN` keeps it out.
 * @throws {KernelError} `shape`; `bad-interval`, `overlap` with { row }; `bad-parameter` at a rule.
 * @see Common practice of resource estimation; the equal-length form is the usual way to leave no
 *   residual.
 */
export function planComposites(
  intervals: IntervalsByHole,
  domain: Int32Array,
  rules: CompositeRules,
  onProgress?: (share: number) => void,
): CompositePlan {
  checkIntervalsByHole(intervals);
  const n = intervals.fromM.length;
  if (domain.length !== n) {
    throw new KernelError('shape', `expected ${n} domain codes, found ${domain.length}`);
  }
  const layout: Layout = {
    composites: [],
    pieces: [],
    discarded: { count: 0, lengthM: 0 },
    withoutDomainM: 0,
  };
  compositeBreaks(0, 1, rules); // refuses bad rules even where there is nothing to cut
  const depths = { topM: touchingTops(intervals), toM: intervals.toM };
  const holeStarts = [0];
  for (let hole = 0; hole + 1 < intervals.holeStarts.length; hole++) {
    for (const run of domainRuns(intervals, depths.topM, domain, hole)) {
      layRun(layout, run, domain[run.rows[0]!]!, depths, rules);
    }
    holeStarts.push(layout.composites.length);
    onProgress?.((hole + 1) / (intervals.holeStarts.length - 1));
  }
  return planOf(layout, holeStarts);
}

/** Depth at which each interval starts once near ends are taken as one. */
function touchingTops({ holeStarts, fromM, toM }: IntervalsByHole): Float64Array {
  const tops = fromM.slice();
  for (let hole = 0; hole + 1 < holeStarts.length; hole++) {
    let reached = -Infinity;
    for (let row = holeStarts[hole]!; row < holeStarts[hole + 1]!; row++) {
      if (fromM[row]! - reached <= LOGGING_TOLERANCE_M) tops[row] = Math.min(reached, toM[row]!);
      reached = Math.max(reached, toM[row]!);
    }
  }
  return tops;
}

function domainRuns(
  { holeStarts, toM, isBreakBefore }: IntervalsByHole,
  topM: Float64Array,
  domain: Int32Array,
  hole: number,
): DomainRun[] {
  const runs: DomainRun[] = [];
  let last: DomainRun | null = null;
  for (let row = holeStarts[hole]!; row < holeStarts[hole + 1]!; row++) {
    const continues =
      last !== null &&
      domain[row] === domain[row - 1] &&
      isBreakBefore?.[row] !== 1 &&
      topM[row]! <= last.toM;
    if (last !== null && continues) {
      last.rows.push(row);
      last.toM = Math.max(last.toM, toM[row]!);
    } else {
      last = { rows: [row], fromM: topM[row]!, toM: toM[row]! };
      runs.push(last);
    }
  }
  return runs;
}

interface Composite {
  fromM: number;
  toM: number;
  domain: number;
  isShort: boolean;
}

interface Piece {
  row: number;
  composite: number;
  lengthM: number;
}

/** Composites and pieces so far. */
interface Layout {
  composites: Composite[];
  pieces: Piece[];
  discarded: { count: number; lengthM: number };
  withoutDomainM: number;
}

function layRun(
  layout: Layout,
  run: DomainRun,
  domain: number,
  { topM, toM }: { topM: Float64Array; toM: Float64Array },
  rules: CompositeRules,
): void {
  const { composites, pieces, discarded } = layout;
  if (domain === NO_DOMAIN) {
    layout.withoutDomainM += run.toM - run.fromM;
    for (const row of run.rows) {
      pieces.push({ row, composite: -1, lengthM: toM[row]! - topM[row]! });
    }
    return;
  }
  const { breaks, isLastDiscarded, leastM } = compositeBreaks(run.fromM, run.toM, rules);
  const first = composites.length;
  for (let i = 0; i + 1 < breaks.length; i++) {
    const [from, to] = [breaks[i]!, breaks[i + 1]!];
    if (isLastDiscarded && i + 2 === breaks.length) {
      discarded.count++;
      discarded.lengthM += to - from;
    } else composites.push({ fromM: from, toM: to, domain, isShort: to - from < leastM });
  }
  let at = 0;
  for (const row of run.rows) {
    for (let top = topM[row]!; top < toM[row]!;) {
      while (at + 2 < breaks.length && breaks[at + 1]! <= top) at++;
      const isLast = at + 2 === breaks.length;
      const bottom = isLast ? toM[row]! : Math.min(toM[row]!, breaks[at + 1]!);
      const composite = first + at < composites.length ? first + at : -1;
      pieces.push({ row, composite, lengthM: bottom - top });
      top = bottom;
    }
  }
}

function planOf({ composites, pieces, ...rest }: Layout, holeStarts: number[]): CompositePlan {
  return {
    holeStarts: Int32Array.from(holeStarts),
    fromM: Float64Array.from(composites, ({ fromM }) => fromM),
    toM: Float64Array.from(composites, ({ toM }) => toM),
    domain: Int32Array.from(composites, ({ domain }) => domain),
    isShort: Uint8Array.from(composites, ({ isShort }) => Number(isShort)),
    pieceRow: Int32Array.from(pieces, ({ row }) => row),
    pieceComposite: Int32Array.from(pieces, ({ composite }) => composite),
    pieceM: Float64Array.from(pieces, ({ lengthM }) => lengthM),
    ...rest,
  };
}
