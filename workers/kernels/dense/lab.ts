import { plainMath } from './plain-math.ts';
import { simdMath } from './simd-math.ts';
import { SIMD_BINARY } from './simd-binary.ts';
import { EXP_TABLE, LOG_TABLE } from './tables.ts';
import type { DenseMath } from './dense-math.ts';

/** Memory for arrays that `DenseMath` works on, and the maths itself. */
export interface Lab {
  readonly math: DenseMath;
  /** Arrays of zeros; they are valid until the work that was given the lab is done. */
  f64(length: number): Float64Array;
  u32(length: number): Uint32Array;
  u8(length: number): Uint8Array;
}

interface OwnedLab extends Lab {
  /** Makes room for `bytes`, all of it free and zero. */
  clear(bytes: number): void;
  readonly size: number;
}

/** Arrays begin at multiples of this. */
const ALIGNMENT = 16;
const PAGE = 65_536;
/** The tables of `workers/simd/memory.ts`. */
const TABLE_BYTES = 4096;
/** Larger memories are given back to the system rather than kept for the next work. */
const KEPT_BYTES = 2 ** 27;

/** Bytes of arrays of doubles of these lengths in a lab. */
export const f64Bytes = (...lengths: number[]): number =>
  lengths.reduce((sum, length) => sum + 8 * length + ALIGNMENT, 0);

/** A copy of values in a lab. */
export function copyInto(lab: Lab, values: Float64Array): Float64Array {
  const copy = lab.f64(values.length);
  copy.set(values);
  return copy;
}

const module = WebAssembly.validate(SIMD_BINARY) ? new WebAssembly.Module(SIMD_BINARY) : null;
const spare: OwnedLab[] = [];

/**
 * Does work with a lab that has room for `bytes`. Labs of a thread are used again; nested work gets
 * another one.
 */
export function withLab<T>(bytes: number, work: (lab: Lab) => T): T {
  const lab = spare.pop() ?? (module ? simdLab(module) : plainLab());
  lab.clear(bytes);
  try {
    return work(lab);
  } finally {
    if (lab.size <= KEPT_BYTES) spare.push(lab);
  }
}

/** A lab of ordinary arrays, for machines without SIMD and for tests of agreement. */
export function plainLab(): OwnedLab {
  return {
    math: plainMath,
    size: 0,
    clear: () => undefined,
    f64: (length) => new Float64Array(length),
    u32: (length) => new Uint32Array(length),
    u8: (length) => new Uint8Array(length),
  };
}

/** A lab in a WebAssembly memory of its own; null where the machine has no SIMD. */
export function newSimdLab(): OwnedLab | null {
  return module && simdLab(module);
}

function simdLab(compiled: WebAssembly.Module): OwnedLab {
  const memory = new WebAssembly.Memory({ initial: 1 });
  const math = simdMath(new WebAssembly.Instance(compiled, { env: { memory } }), memory);
  new Float64Array(memory.buffer).set(LOG_TABLE);
  new Float64Array(memory.buffer).set(EXP_TABLE, LOG_TABLE.length);
  let next = TABLE_BYTES;
  const take = (bytes: number): number => {
    const at = next;
    next += ALIGNMENT * Math.ceil(bytes / ALIGNMENT);
    return at;
  };
  return {
    math,
    get size() {
      return memory.buffer.byteLength;
    },
    clear(bytes) {
      new Uint8Array(memory.buffer, TABLE_BYTES, next - TABLE_BYTES).fill(0);
      next = TABLE_BYTES;
      const missing = TABLE_BYTES + bytes - memory.buffer.byteLength;
      if (missing > 0) memory.grow(Math.ceil(missing / PAGE));
    },
    f64: (length) => new Float64Array(memory.buffer, take(8 * length), length),
    u32: (length) => new Uint32Array(memory.buffer, take(4 * length), length),
    u8: (length) => new Uint8Array(memory.buffer, take(length), length),
  };
}
