import type { FaultPlane } from '#contract/snapshots.ts';
import { distancesToFault, sidesOfFault } from '#kernels/recipe/fault-sides.ts';
import { NOT_LOGGED } from '#kernels/tables/category.ts';
import type { LoadedTable } from './read-rows.ts';

export function faultPlanes(table: LoadedTable | null): FaultPlane[] {
  if (!table) return [];
  const columns = ['x', 'y', 'z', 'dip', 'dip direction'].map((name) => table.numbers(name));
  return table.texts('name').map((name, row) => {
    const [x, y, z, dip, dipDirection] = columns.map((column) => column[row] ?? 0);
    return { name, x: x ?? 0, y: y ?? 0, z: z ?? 0, dip: dip ?? 0, dipDirection: dipDirection ?? 0 };
  });
}

/** Side of a fault each point lies on, as places in FAULT_SIDES; NaN without coordinates. */
export function sidesOf(fault: FaultPlane, x: Float64Array, y: Float64Array, z: Float64Array): Float64Array {
  const points = new Float64Array(3 * x.length);
  for (let row = 0; row < x.length; row++) points.set([x[row] ?? Number.NaN, y[row] ?? Number.NaN, z[row] ?? Number.NaN], 3 * row);
  const { codes } = sidesOfFault(distancesToFault(points, fault));
  return Float64Array.from(codes, (code) => (code === NOT_LOGGED ? Number.NaN : code));
}
