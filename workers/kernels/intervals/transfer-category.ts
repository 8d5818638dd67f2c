import { KernelError } from '#kernels/kernel-error.ts';
import {
  LOGGING_TOLERANCE_M,
  orderByDepth,
  orderWithoutOverlap,
  overlapM,
  type IntervalTable,
} from './interval-table.ts';

/** Logged categories of one hole: `code` indexes a dictionary, -1 = nothing logged. */
export interface LoggedCategories extends IntervalTable {
  code: Int32Array;
}

/** Categories brought onto sample intervals, one entry per sample row. */
export interface TransferredCategories {
  /** Accepted category; -1 where nothing is logged or no category reaches the accepted share. */
  code: Int32Array;
  /** Longest category's share of the logged length of the sample; 0 where nothing is logged. */
  dominance: Float64Array;
  /** Share of the sample's length that is logged. */
  loggedShare: Float64Array;
  /** 1 where a contact runs through the sample and no category dominates: leave out at contacts. */
  isMixed: Uint8Array;
}

export interface TransferOptions {
  /** Share of the logged length the longest category needs. */
  acceptShare?: number;
  /** Samples with a contact inside and a dominance under this are mixed. */
  mixedBelow?: number;
  toleranceM?: number;
}

/**
 * Transfers a logged category onto sample intervals of one hole by the longest overlapped length;
 * of equal lengths the upper category wins. O(n log n).
 *
 * @param samples Sample intervals in any order; they may overlap each other.
 * @param logs Logged intervals in any order, without overlaps.
 * @throws {KernelError} `shape`, `bad-interval`, `overlap`; `bad-parameter` for a share outside
 *   [0, 1].
 */
export function transferCategory(
  samples: IntervalTable,
  logs: LoggedCategories,
  options: TransferOptions = {},
): TransferredCategories {
  const { acceptShare = 0.5, mixedBelow = 0.7, toleranceM = LOGGING_TOLERANCE_M } = options;
  for (const share of [acceptShare, mixedBelow]) {
    if (!(share >= 0 && share <= 1)) {
      throw new KernelError('bad-parameter', `expected a share in [0, 1], found ${share}`);
    }
  }
  if (logs.code.length !== logs.fromM.length) {
    throw new KernelError(
      'shape',
      `${logs.code.length} codes for ${logs.fromM.length} logged rows`,
    );
  }
  const sampleOrder = orderByDepth(samples);
  const logOrder = orderWithoutOverlap(logs, toleranceM);
  const out = emptyTransfer(samples.fromM.length);
  let first = 0;
  for (const row of sampleOrder) {
    const [top, bottom] = [samples.fromM[row]!, samples.toM[row]!];
    while (first < logOrder.length && logs.toM[logOrder[first]!]! <= top) first++;
    const lengths = lengthsByCode(logs, logOrder, first, top, bottom);
    if (lengths.size > 0) fillRow(out, row, lengths, bottom - top, { acceptShare, mixedBelow });
  }
  return out;
}

function emptyTransfer(count: number): TransferredCategories {
  return {
    code: new Int32Array(count).fill(-1),
    dominance: new Float64Array(count),
    loggedShare: new Float64Array(count),
    isMixed: new Uint8Array(count),
  };
}

/** Overlapped length per category, in order of depth. */
function lengthsByCode(
  logs: LoggedCategories,
  order: Uint32Array,
  first: number,
  top: number,
  bottom: number,
): Map<number, number> {
  const lengths = new Map<number, number>();
  for (let i = first; i < order.length && logs.fromM[order[i]!]! < bottom; i++) {
    const log = order[i]!;
    const code = logs.code[log]!;
    const shared = overlapM(top, bottom, logs.fromM[log]!, logs.toM[log]!);
    if (code >= 0 && shared > 0) lengths.set(code, (lengths.get(code) ?? 0) + shared);
  }
  return lengths;
}

function fillRow(
  out: TransferredCategories,
  row: number,
  lengths: ReadonlyMap<number, number>,
  lengthM: number,
  { acceptShare, mixedBelow }: { acceptShare: number; mixedBelow: number },
): void {
  let [logged, longest, winner] = [0, 0, -1];
  for (const [code, length] of lengths) {
    logged += length;
    // A tie keeps the upper category even when rounding makes the lower a hair longer.
    if (length > longest * (1 + 1e-9)) [longest, winner] = [length, code];
  }
  const dominance = longest / logged;
  out.code[row] = dominance >= acceptShare - 1e-9 ? winner : -1;
  out.dominance[row] = dominance;
  out.loggedShare[row] = Math.min(logged / lengthM, 1);
  out.isMixed[row] = lengths.size > 1 && dominance < mixedBelow - 1e-9 ? 1 : 0;
}
