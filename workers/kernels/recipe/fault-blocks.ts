import { KernelError } from '#kernels/kernel-error.ts';
import { categoryFrom, type Category } from '#kernels/tables/category.ts';
import type { FAULT_SIDES } from './fault-sides.ts';

/** A fault that stops at another: its side counts only on one side of the other. */
export interface FaultStop {
  fault: number;
  stopsAt: number;
  /** Side of `stopsAt` on which `fault` exists. */
  existsOn: (typeof FAULT_SIDES)[number];
}

/**
 * Fault block of each point: a sign for each fault in order, `+` above, `-` below, `.` where the
 * fault does not exist. A point without position has no block.
 *
 * @param distancesM Signed distances to each fault, n values each.
 * @param stops Which faults stop at which; a fault may have several.
 * @throws {KernelError} `shape`; `bad-parameter` at a stop that names no fault or itself.
 */
export function faultBlocks(
  distancesM: readonly Float64Array[],
  stops: readonly FaultStop[] = [],
): Category {
  const n = distancesM[0]?.length ?? 0;
  if (distancesM.some((distances) => distances.length !== n)) {
    throw new KernelError('shape', `expected ${n} distances to every fault`);
  }
  for (const { fault, stopsAt } of stops) {
    if (fault === stopsAt || !distancesM[fault] || !distancesM[stopsAt]) {
      const message = `expected two of ${distancesM.length} faults, found ${fault} stopping at ${stopsAt}`;
      throw new KernelError('bad-parameter', message, { fault, stopsAt });
    }
  }
  const exists = (fault: number, row: number) =>
    stops.every(
      (stop) =>
        stop.fault !== fault ||
        distancesM[stop.stopsAt]![row]! >= 0 === (stop.existsOn === 'above'),
    );
  const blockOf = (row: number): string | null => {
    if (distancesM.some((distances) => Number.isNaN(distances[row]))) return null;
    const sign = (distances: Float64Array, fault: number) =>
      !exists(fault, row) ? '.' : distances[row]! >= 0 ? '+' : '-';
    return distancesM.map(sign).join('');
  };
  return categoryFrom(Array.from({ length: n }, (_, row) => blockOf(row)));
}
