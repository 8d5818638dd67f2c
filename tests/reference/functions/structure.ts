import { planeFromCore } from '#kernels/geometry/oriented-core.ts';
import { planeNormal, poleOf, strikeOf } from '#kernels/geometry/planes.ts';
import { inputNumber, type Adapters } from '../adapter.ts';

/** Planes, poles and oriented core; every number is in the inputs. */
export const STRUCTURE: Adapters = {
  plane_to_pole: (_set, check) => {
    const plane = {
      dip: inputNumber(check, 'dip'),
      dipDirection: inputNumber(check, 'dip_direction'),
    };
    const { trend, plunge } = poleOf(plane);
    return {
      strike_rhr: strikeOf(plane),
      pole_trend: trend,
      pole_plunge: plunge,
      upward_normal: planeNormal(plane.dip, plane.dipDirection),
    };
  },
  alpha_beta_to_plane: (_set, check) => {
    const hole = { azimuth: inputNumber(check, 'azimuth'), dip: inputNumber(check, 'dip') };
    const angles = { alpha: inputNumber(check, 'alpha'), beta: inputNumber(check, 'beta') };
    const { dip, dipDirection } = planeFromCore(hole, angles);
    return { dip_direction: dipDirection, dip };
  },
};
