/** Places of the tables that are written once by the host; what lies beyond is the caller's. */
export const LOG_TABLE: usize = 0;
export const EXP_TABLE: usize = 16384;

/** Sum of both lanes. */
@inline
export function both(v: v128): f64 {
  return f64x2.extract_lane(v, 0) + f64x2.extract_lane(v, 1);
}
