const DIGITS = 11;
const BUCKETS = 1 << DIGITS;
const PASSES = 6;

/** Bits that order like the double: negative numbers turned over, the sign of the others set. */
@inline
function ordered(bits: u64): u64 {
  return bits ^ (u64(i64(bits) >> 63) | 0x8000000000000000);
}

@inline
function restored(key: u64): u64 {
  return key ^ (u64(i64(~key) >> 63) | 0x8000000000000000);
}

/** See `DenseMath.sort`: least significant digits first, a digit that all values share is passed over. */
export function sort(x: usize, n: i32, spare: usize, counts: usize): void {
  memory.fill(counts, 0, usize(PASSES * BUCKETS) << 2);
  const end = x + (usize(n) << 3);
  for (let at = x; at < end; at += 8) {
    const key = ordered(load<u64>(at));
    store<u64>(at, key);
    for (let pass = 0; pass < PASSES; pass++) {
      const place = counts + (usize(pass * BUCKETS + i32((key >> (pass * DIGITS)) & (BUCKETS - 1))) << 2);
      store<u32>(place, load<u32>(place) + 1);
    }
  }
  let from = x;
  let to = spare;
  for (let pass = 0; pass < PASSES; pass++) {
    const table = counts + (usize(pass * BUCKETS) << 2);
    const shift = u64(pass * DIGITS);
    const first = (load<u64>(from) >> shift) & (BUCKETS - 1);
    if (load<u32>(table + (usize(first) << 2)) == u32(n)) continue;
    let before: u32 = 0;
    for (let bucket = 0; bucket < BUCKETS; bucket++) {
      const place = table + (usize(bucket) << 2);
      const size = load<u32>(place);
      store<u32>(place, before);
      before += size;
    }
    const last = from + (usize(n) << 3);
    for (let at = from; at < last; at += 8) {
      const key = load<u64>(at);
      const place = table + (usize((key >> shift) & (BUCKETS - 1)) << 2);
      const rank = load<u32>(place);
      store<u32>(place, rank + 1);
      store<u64>(to + (usize(rank) << 3), key);
    }
    const swap = from;
    from = to;
    to = swap;
  }
  for (let i = 0; i < n; i++) {
    store<u64>(x + (usize(i) << 3), restored(load<u64>(from + (usize(i) << 3))));
  }
}
