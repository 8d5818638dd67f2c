import { KernelError } from '#kernels/kernel-error.ts';
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
const TABLE_BYTES = 20_480;
/** A WebAssembly memory ends here; a page is left over. */
const LARGEST_BYTES = 2 ** 32 - 2 * PAGE;
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

const loops = WebAssembly.validate(SIMD_BINARY) ? new WebAssembly.Module(SIMD_BINARY) : null;
const spare: OwnedLab[] = [];

/**
 * Does work with a lab that has room for `bytes`. Labs of a thread are used again; nested work gets
 * another one.
 *
 * @throws {KernelError} `too-large` beyond the 4 GiB one memory can have.
 */
export function withLab<T>(bytes: number, work: (lab: Lab) => T): T {
  if (bytes > LARGEST_BYTES) {
    const message = `expected work that fits in 4 GiB, found ${Math.ceil(bytes / 2 ** 30)} GiB; use fewer rows or columns`;
    throw new KernelError('too-large', message, { bytes });
  }
  const lab = spareFor(bytes) ?? (loops ? simdLab(loops) : plainLab());
  lab.clear(bytes);
  try {
    return work(lab);
  } finally {
    if (lab.size <= KEPT_BYTES) spare.unshift(lab);
  }
}

/** Takes the smallest spare lab that is large enough, or else the largest, so that few ever grow. */
function spareFor(bytes: number): OwnedLab | undefined {
  spare.sort((a, b) => a.size - b.size);
  const fit = spare.findIndex(({ size }) => size >= TABLE_BYTES + bytes);
  return spare.splice(fit < 0 ? spare.length - 1 : fit, 1)[0];
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
  return loops && simdLab(loops);
}

function simdLab(compiled: WebAssembly.Module): OwnedLab {
  const memory = new WebAssembly.Memory({ initial: 1 });
  const math = simdMath(new WebAssembly.Instance(compiled, { env: { memory } }), memory);
  new Float64Array(memory.buffer).set(LOG_TABLE);
  new Float64Array(memory.buffer).set(EXP_TABLE, LOG_TABLE.length);
  let next = TABLE_BYTES;
  /** End of what may not be zero. */
  let used = TABLE_BYTES;
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
      const end = TABLE_BYTES + bytes;
      new Uint8Array(memory.buffer).fill(0, TABLE_BYTES, Math.min(end, used));
      next = TABLE_BYTES;
      used = Math.max(end, used);
      const missing = end - memory.buffer.byteLength;
      if (missing > 0) memory.grow(Math.ceil(missing / PAGE));
    },
    f64: (length) => new Float64Array(memory.buffer, take(8 * length), length),
    u32: (length) => new Uint32Array(memory.buffer, take(4 * length), length),
    u8: (length) => new Uint8Array(memory.buffer, take(length), length),
  };
}
