import { LOG_CELLS, LOG_TABLE } from './tables.ts';

const value = new Float64Array(1);
const words = new Uint32Array(value.buffer);
const THIRD = 1 / 3;
/** 2^54 makes any subnormal number a normal one. */
const RAISE = 2 ** 54;

/**
 * ln x by table and series: x = 2^e c (1 + r) with |r| < 1/2048; within 1e-15 of `Math.log`. NaN unless
 * x is a finite number > 0.
 */
export function lnByTable(x: number): number {
  if (!(x > 0 && x < Infinity)) return NaN;
  value[0] = x;
  const isSubnormal = words[1]! >>> 20 === 0;
  if (isSubnormal) value[0] = x * RAISE;
  const high = words[1]!;
  const exponent = (high >>> 20) - 1023 - (isSubnormal ? 54 : 0);
  words[1] = (high & 0xfffff) | 0x3ff00000;
  const cell = 2 * ((high >>> 10) & (LOG_CELLS - 1));
  const r = value[0] * LOG_TABLE[cell]! - 1;
  const tail = r * r * (0.5 - r * (THIRD - r * 0.25));
  return exponent * Math.LN2 + (LOG_TABLE[cell + 1]! + (r - tail));
}
