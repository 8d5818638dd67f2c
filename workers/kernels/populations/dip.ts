import { sortedAscending } from '#kernels/statistics/sort-ascending.ts';
import { requireFinite } from '#kernels/statistics/require-finite.ts';

/** The dip and the interval the best-fitting unimodal distribution has its mode in. */
export interface Dip {
  /** Largest distance between the empirical and the closest unimodal distribution function, 1/(2n) to 1/4. */
  dip: number;
  modeFrom: number;
  modeTo: number;
}

/** Distinct values (scaled when extreme) with the number of values below each (`below`) and up to it (`upTo`). */
interface Steps {
  x: Float64Array;
  below: Float64Array;
  upTo: Float64Array;
  n: number;
  scale: number;
}

/** Corners of a convex or concave hull as places among the distinct values, ascending. */
interface Hull {
  at: Int32Array;
  size: number;
}

/**
 * Dip of a sample: the smallest distance sup|F_n - F| over all unimodal F (convex up to a mode,
 * concave after it).
 *
 * The greatest convex minorant of F_n fits the left flank and its least concave majorant the right
 * one. Starting from the whole range, the modal interval is narrowed to where majorant and minorant
 * are farthest apart; what the flanks given up so far miss of F_n is the (doubled) dip. It ends when
 * inside the interval the two are no farther apart than that.
 *
 * @param values Any unit (ln grade for grades), at least one, in any order. Not modified.
 * @throws {KernelError} `too-few-rows`, `not-finite`.
 * @see Hartigan & Hartigan (1985), The dip test of unimodality, Ann. Stat. 13, 70-84 (written from
 *   the definition).
 */
export function dipStatistic(values: ArrayLike<number>): Dip {
  requireFinite(values, 'values');
  return dipOfSorted(sortedAscending(values));
}

/** `dipStatistic` of values already in ascending order. */
export function dipOfSorted(sorted: Float64Array): Dip {
  const steps = stepsOf(sorted);
  const m = steps.x.length;
  const minorant: Hull = { at: new Int32Array(m), size: 0 };
  const majorant: Hull = { at: new Int32Array(m), size: 0 };
  const before = cornersBefore(steps.x, steps.below);
  const after = cornersAfter(steps.x, steps.upTo);
  let from = 0;
  let to = m - 1;
  let missed = 1; // twice the dip, in counts: no less than one step of F_n
  for (;;) {
    minorantBetween(from, to, before, minorant);
    majorantBetween(from, to, after, majorant);
    const widest = widestGap(steps, minorant, majorant);
    if (widest.gap <= missed || from === to) break; // a mode of one value may be a jump
    missed = Math.max(
      missed,
      missedLeft(steps, minorant, widest.from),
      missedRight(steps, majorant, widest.to),
    );
    ({ from, to } = widest);
  }
  return {
    dip: missed / (2 * steps.n),
    modeFrom: steps.x[from]! * steps.scale,
    modeTo: steps.x[to]! * steps.scale,
  };
}

function stepsOf(sorted: Float64Array): Steps {
  const n = sorted.length;
  const largest = Math.max(Math.abs(sorted[0]!), Math.abs(sorted[n - 1]!));
  const scale = largest > 1e100 || (largest > 0 && largest < 1e-100) ? largest : 1; // products must neither overflow nor vanish
  const x = new Float64Array(n);
  const below = new Float64Array(n);
  const upTo = new Float64Array(n);
  let m = 0;
  for (let i = 0; i < n; m++) {
    x[m] = sorted[i]! / scale;
    below[m] = i;
    while (i < n && sorted[i]! / scale === x[m]) i += 1;
    upTo[m] = i;
  }
  return { x: x.subarray(0, m), below: below.subarray(0, m), upTo: upTo.subarray(0, m), n, scale };
}

/**
 * For every value the corner before it in the lower hull of the points up to it. The corners of the
 * hull from one of its corners to a later value are then a walk: a corner of the hull of all points
 * up to some value is one of the hull of any of them that hold it.
 */
function cornersBefore(x: Float64Array, y: Float64Array): Int32Array {
  const before = new Int32Array(x.length).fill(-1);
  for (let j = 1; j < x.length; j++) {
    let b = j - 1;
    for (let a = before[b]!; a >= 0; b = a, a = before[b]!) {
      if ((y[b]! - y[a]!) * (x[j]! - x[b]!) < (y[j]! - y[b]!) * (x[b]! - x[a]!)) break;
    }
    before[j] = b;
  }
  return before;
}

/** For every value the corner after it in the upper hull of the points from it on. */
function cornersAfter(x: Float64Array, y: Float64Array): Int32Array {
  const last = x.length - 1;
  const after = new Int32Array(x.length).fill(-1);
  for (let j = last - 1; j >= 0; j--) {
    let b = j + 1;
    for (let c = after[b]!; c >= 0; b = c, c = after[b]!) {
      if ((y[c]! - y[b]!) * (x[b]! - x[j]!) < (y[b]! - y[j]!) * (x[c]! - x[b]!)) break;
    }
    after[j] = b;
  }
  return after;
}

function minorantBetween(from: number, to: number, before: Int32Array, out: Hull): void {
  let size = 0;
  for (let j = to; j > from; j = before[j]!) out.at[size++] = j;
  out.at[size++] = from;
  out.at.subarray(0, size).reverse();
  out.size = size;
}

function majorantBetween(from: number, to: number, after: Int32Array, out: Hull): void {
  let size = 0;
  for (let j = from; j < to; j = after[j]!) out.at[size++] = j;
  out.at[size++] = to;
  out.size = size;
}

/** Height at place j of the hull's edge from corner a to corner b. */
function heightAt(x: Float64Array, y: Float64Array, a: number, b: number, j: number): number {
  return a === b ? y[a]! : y[a]! + ((y[b]! - y[a]!) * (x[j]! - x[a]!)) / (x[b]! - x[a]!);
}

/**
 * Largest distance of majorant over minorant (at a corner of either, as their difference is concave)
 * and the narrower modal interval it asks for: from a corner of the minorant to one of the majorant.
 */
function widestGap(
  { x, below, upTo }: Steps,
  minorant: Hull,
  majorant: Hull,
): { gap: number; from: number; to: number } {
  let widest = { gap: -1, from: 0, to: 0 };
  let a = 0; // last corner of the minorant at or left of the place in hand
  let b = 0; // first corner of the majorant at or right of it
  let i = 0;
  let j = 0;
  while (i < minorant.size || j < majorant.size) {
    const nextMinor = i < minorant.size ? minorant.at[i]! : Infinity;
    const nextMajor = j < majorant.size ? majorant.at[j]! : Infinity;
    const place = Math.min(nextMinor, nextMajor);
    while (a + 1 < minorant.size && minorant.at[a + 1]! <= place) a += 1;
    while (majorant.at[b]! < place) b += 1;
    const low = heightAt(
      x,
      below,
      minorant.at[a]!,
      minorant.at[Math.min(a + 1, minorant.size - 1)]!,
      place,
    );
    const high = heightAt(x, upTo, majorant.at[Math.max(b - 1, 0)]!, majorant.at[b]!, place);
    if (high - low > widest.gap)
      widest = { gap: high - low, from: minorant.at[a]!, to: majorant.at[b]! };
    if (nextMinor === place) i += 1;
    if (nextMajor === place) j += 1;
  }
  return widest;
}

/** Most that F_n rises above the minorant from its first corner to the corner `last`, which may be the mode and jump. */
function missedLeft({ x, below, upTo }: Steps, { at }: Hull, last: number): number {
  let most = 0;
  for (let corner = 0; at[corner]! < last; corner++) {
    for (let j = at[corner]!; j < at[corner + 1]!; j++) {
      most = Math.max(most, upTo[j]! - heightAt(x, below, at[corner]!, at[corner + 1]!, j));
    }
  }
  return most;
}

/** Most that the majorant rises above F_n, just left of a value, after the corner `first` to its last. */
function missedRight({ x, below, upTo }: Steps, { at, size }: Hull, first: number): number {
  let most = 0;
  for (let corner = size - 1; at[corner]! > first; corner--) {
    for (let j = at[corner]!; j > at[corner - 1]!; j--) {
      most = Math.max(most, heightAt(x, upTo, at[corner - 1]!, at[corner]!, j) - below[j]!);
    }
  }
  return most;
}
