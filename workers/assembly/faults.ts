import type { FaultPlane } from '#contract/snapshots.ts';
import { planeNormal } from '#kernels/geometry/planes.ts';
import type { LoadedTable } from './read-rows.ts';

export function faultPlanes(table: LoadedTable | null): FaultPlane[] {
  if (!table) return [];
  const columns = ['x', 'y', 'z', 'dip', 'dip direction'].map((name) => table.numbers(name));
  return table.texts('name').map((name, row) => {
    const [x, y, z, dip, dipDirection] = columns.map((column) => column[row] ?? 0);
    return { name, x: x ?? 0, y: y ?? 0, z: z ?? 0, dip: dip ?? 0, dipDirection: dipDirection ?? 0 };
  });
}

export const SIDES = ['above', 'below'];

/** Side of a fault plane each point lies on: 0 above (hanging wall), 1 below, NaN without coordinates. */
export function sidesOf(fault: FaultPlane, x: Float64Array, y: Float64Array, z: Float64Array): Float64Array {
  const [east, north, up] = planeNormal(fault.dip, fault.dipDirection);
  return x.map((easting, row) => {
    const distance = (easting - fault.x) * east + ((y[row] ?? 0) - fault.y) * north + ((z[row] ?? 0) - fault.z) * up;
    return Number.isNaN(distance) ? distance : distance >= 0 ? 0 : 1;
  });
}
