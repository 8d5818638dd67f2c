import { KernelError } from '#kernels/kernel-error.ts';
import { VALUE_STATE } from './replacement.ts';

/** How a row takes part in a fit. */
export const ROW_USE = { leftOut: 0, fit: 1, scoredOnly: 2 } as const;

/** Which rows a log-ratio analysis can use. */
export interface RowUse {
  /** One of {@link ROW_USE} per row. */
  use: Uint8Array;
  nFit: number;
  nScoredOnly: number;
  nLeftOut: number;
}

/**
 * Sorts rows by their parts: a row missing a part is left out; a row with more than a share of its
 * parts below detection is scored but not fitted, since it says more about limits than about rock.
 *
 * @param states VALUE_STATE per row, one array per part.
 * @param belowLimitShare Largest share of parts below detection in a fitted row.
 * @throws {KernelError} `too-few-parts`, `shape`; `bad-parameter` for a share outside [0, 1].
 */
export function rowUse(states: readonly Uint8Array[], belowLimitShare = 0.3): RowUse {
  const [first] = states;
  if (!first) throw new KernelError('too-few-parts', 'expected at least one part, found none');
  if (states.some((column) => column.length !== first.length)) {
    throw new KernelError('shape', `expected ${first.length} states in each part`);
  }
  if (!(belowLimitShare >= 0 && belowLimitShare <= 1)) {
    throw new KernelError('bad-parameter', `expected a share in [0, 1], found ${belowLimitShare}`);
  }
  const nBelow = new Uint16Array(first.length);
  const isMissing = new Uint8Array(first.length);
  for (const column of states) {
    for (let row = 0; row < column.length; row++) {
      const state = column[row]!;
      if (state === VALUE_STATE.below) nBelow[row]! += 1;
      else if (state >= VALUE_STATE.missing) isMissing[row] = 1;
    }
  }
  const most = belowLimitShare * states.length + 1e-9;
  const counts = [0, 0, 0];
  const use = new Uint8Array(first.length);
  for (let row = 0; row < use.length; row++) {
    const value = isMissing[row]
      ? ROW_USE.leftOut
      : nBelow[row]! > most
        ? ROW_USE.scoredOnly
        : ROW_USE.fit;
    use[row] = value;
    counts[value]! += 1;
  }
  const [nLeftOut = 0, nFit = 0, nScoredOnly = 0] = counts;
  return { use, nFit, nScoredOnly, nLeftOut };
}
