/** One workload, done by ours and by a peer that does the same or the least that must be done. */
export interface Bench {
  workload: string;
  peerName: string;
  /** Time aimed at on a quiet machine of two cores, if there is one; the fastest run is held against it. */
  targetMs?: number;
  /** Bytes that must be read and written once: the machine's own limit for the workload. */
  bytes?: number;
  ours: () => void | Promise<void>;
  /** A peer that times itself gives its milliseconds; null where it is not installed. */
  peer: () => void | number | null | Promise<void | number | null>;
  /** What else was measured, told after the runs. */
  figures?: () => string;
  close: () => void | Promise<void>;
}

export interface Measured {
  /** Medians, ms; null without a peer. */
  ours: number;
  peer: number | null;
  /** Median of the ratios of the rounds. */
  ratio: number | null;
  fastest: number;
}

const ROUNDS = 5;
/** Slow work is measured in fewer rounds. */
const FEWER_ROUNDS = { from: 5_000, rounds: 3 };

export function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.floor(sorted.length / 2)] ?? NaN;
}

/** What the work says it took, or what it took on the clock. */
async function timeMs(work: Bench['peer']): Promise<number | null> {
  const startedAt = performance.now();
  const own = await work();
  return own === undefined ? performance.now() - startedAt : own;
}

/** One round unmeasured, then ours and peer in turn, so that a busy moment falls on both. */
export async function measure({ ours, peer }: Bench): Promise<Measured> {
  const rounds: { ours: number; peer: number | null }[] = [];
  const round = async () => ({ ours: (await timeMs(ours)) ?? NaN, peer: await timeMs(peer) });
  const first = await round();
  const count = first.ours + (first.peer ?? 0) > FEWER_ROUNDS.from ? FEWER_ROUNDS.rounds : ROUNDS;
  for (let i = 0; i < count; i++) rounds.push(await round());
  const peers = rounds.flatMap((times) => (times.peer === null ? [] : [times.peer]));
  const ratios = rounds.flatMap((times) => (times.peer === null ? [] : [times.ours / times.peer]));
  return {
    ours: median(rounds.map((times) => times.ours)),
    peer: peers.length > 0 ? median(peers) : null,
    ratio: ratios.length > 0 ? median(ratios) : null,
    fastest: Math.min(...rounds.map((times) => times.ours)),
  };
}

const BANDWIDTH_BYTES = 2 ** 28;

/** Bytes per millisecond that this machine copies, read and written counted. */
export function copyBandwidth(): number {
  const [from, to] = [new Float64Array(BANDWIDTH_BYTES / 8).fill(1), new Float64Array(BANDWIDTH_BYTES / 8)];
  const times = Array.from({ length: 5 }, () => {
    const startedAt = performance.now();
    to.set(from);
    return performance.now() - startedAt;
  });
  return (2 * BANDWIDTH_BYTES) / Math.min(...times);
}
