import { EXP_TABLE } from './memory';

const STEPS: f64 = 64.0;
const LN_2: f64 = 0.6931471805599453;
/** ln 2 less the double nearest to it. */
const LN_2_REST: f64 = 2.3190468138462996e-17;
const PER_UNIT: f64 = STEPS / LN_2;
/** ln 2 / 64 in two parts: the first has few enough bits to be multiplied by a small integer exactly. */
const STEP_HIGH: f64 = f64(f32(LN_2 / STEPS));
const STEP_LOW: f64 = LN_2 / STEPS - STEP_HIGH + LN_2_REST / STEPS;

/** e^x in both lanes for -700 <= x <= 0, the way of `expOfNegative` in `workers/kernels/exp.ts`. */
@inline
export function expTwo(x: v128): v128 {
  const steps = i32x4.trunc_sat_f64x2_s_zero(f64x2.sub(f64x2.splat(0.5), f64x2.mul(x, f64x2.splat(PER_UNIT))));
  const count = f64x2.convert_low_i32x4_s(steps);
  let r = f64x2.add(x, f64x2.mul(count, f64x2.splat(STEP_HIGH)));
  r = f64x2.add(r, f64x2.mul(count, f64x2.splat(STEP_LOW)));
  let series = f64x2.add(f64x2.splat(1.0 / 24.0), f64x2.mul(r, f64x2.splat(1.0 / 120.0)));
  series = f64x2.add(f64x2.splat(1.0 / 6.0), f64x2.mul(r, series));
  series = f64x2.add(f64x2.splat(0.5), f64x2.mul(r, series));
  series = f64x2.add(f64x2.splat(1.0), f64x2.mul(r, series));
  series = f64x2.add(f64x2.splat(1.0), f64x2.mul(r, series));
  const s0 = i32x4.extract_lane(steps, 0);
  const s1 = i32x4.extract_lane(steps, 1);
  let fraction = v128.load64_zero(EXP_TABLE + (usize(s0 & 63) << 3));
  fraction = v128.load64_lane(EXP_TABLE + (usize(s1 & 63) << 3), fraction, 1);
  const halvings = i64x2.extend_low_i32x4_s(i32x4.shr_s(steps, 6));
  const power = i64x2.shl(i64x2.sub(i64x2.splat(1023), halvings), 52);
  return f64x2.mul(f64x2.mul(series, fraction), power);
}
