import { KernelError } from '#kernels/kernel-error.ts';

/**
 * Refuses an empty list and any value that is not a finite number; missing values must be left out
 * before, so that every method can say how many rows it used.
 *
 * @param values Values in their own unit. Not modified.
 * @param what Name of the values for the message.
 * @throws {KernelError} `too-few-rows` when empty; `not-finite` with { row } at the first NaN or
 *   infinity.
 */
export function requireFinite(values: ArrayLike<number>, what: string): void {
  if (values.length === 0) {
    throw new KernelError('too-few-rows', `expected at least one value of ${what}, found none`);
  }
  for (let row = 0; row < values.length; row++) {
    const value = values[row]!;
    if (!Number.isFinite(value)) {
      const message = `expected finite ${what}, found ${value} at row ${row}`;
      throw new KernelError('not-finite', message, { row });
    }
  }
}

/**
 * Checks weights (interval lengths, m) against the values they belong to.
 *
 * @returns Sum of the weights, > 0.
 * @throws {KernelError} `shape` when lengths differ; `not-finite`; `bad-parameter` with { row } at a
 *   negative weight, or when all weights are zero.
 */
export function requireWeights(weights: ArrayLike<number>, count: number): number {
  if (weights.length !== count) {
    throw new KernelError('shape', `expected ${count} weights, found ${weights.length}`);
  }
  requireFinite(weights, 'weights');
  let total = 0;
  for (let row = 0; row < count; row++) {
    const weight = weights[row]!;
    if (weight < 0) {
      const message = `expected a weight >= 0, found ${weight} at row ${row}`;
      throw new KernelError('bad-parameter', message, { row });
    }
    total += weight;
  }
  if (!(total > 0))
    throw new KernelError('bad-parameter', 'expected a weight > 0, found only zeros');
  return total;
}
