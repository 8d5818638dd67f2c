import { dipStatistic } from '#kernels/populations/dip.ts';
import { normalCdf, normalQuantile } from '#kernels/normal.ts';

export interface StopgapFit { k: number; bic: number | null; logLik: number | null; accepted: boolean; note: string | null; components: { share: number; medianPpm: number; logSd: number }[] }

function em(y: Float64Array, k: number): StopgapFit {
  const n = y.length;
  const sorted = Float64Array.from(y).sort();
  const mu = Array.from({ length: k }, (_, i) => sorted[Math.floor(((i + 0.5) / k) * n)] ?? 0);
  const mean = y.reduce((s, v) => s + v, 0) / n;
  const sd0 = Math.sqrt(y.reduce((s, v) => s + (v - mean) ** 2, 0) / n) || 0.1;
  const sd = new Array<number>(k).fill(sd0 / k);
  const pi = new Array<number>(k).fill(1 / k);
  let last = -Infinity;
  let ll = 0;
  for (let it = 0; it < 500; it++) {
    const s0 = new Array<number>(k).fill(0), s1 = [...s0], s2 = [...s0];
    ll = 0;
    for (const v of y) {
      const d = mu.map((m, j) => ((pi[j] ?? 0) / (sd[j] ?? 1)) * Math.exp(-0.5 * ((v - m) / (sd[j] ?? 1)) ** 2));
      const t = d.reduce((a, b) => a + b, 0) || 1e-300;
      ll += Math.log(t) - 0.9189385332;
      d.forEach((q, j) => { const r = q / t; s0[j]! += r; s1[j]! += r * v; s2[j]! += r * v * v; });
    }
    for (let j = 0; j < k; j++) { pi[j] = s0[j]! / n; mu[j] = s1[j]! / s0[j]!; sd[j] = Math.max(0.05, Math.sqrt(Math.max(1e-9, s2[j]! / s0[j]! - mu[j]! ** 2))); }
    if (Math.abs(ll - last) < 1e-6 * Math.abs(ll)) break;
    last = ll;
  }
  const components = mu.map((m, j) => ({ share: pi[j] ?? 0, medianPpm: Math.exp(m), logSd: sd[j] ?? 0 })).sort((a, b) => a.medianPpm - b.medianPpm);
  const accepted = components.every(({ share, logSd }) => share >= 0.03 && logSd > 0.05);
  return { k, bic: -2 * ll + (3 * k - 1) * Math.log(n), logLik: ll, accepted, note: null, components };
}

export function stopgapScreen(values: Float64Array) {
  const y = values.map(Math.log);
  const n = y.length;
  const mixtures = [1, 2, 3].map((k) => em(y, k));
  const dip = dipStatistic(y).dip;
  const scaled = dip * Math.sqrt(n);
  const dipP = scaled > 0.7386 ? 0.001 : scaled > 0.5452 ? 0.05 : scaled > 0.5026 ? 0.1 : 0.5;
  const deltaBic = (mixtures[0]?.bic ?? 0) - (mixtures[1]?.bic ?? 0);
  const two = mixtures[1]?.components ?? [];
  const [a, b] = two;
  const d = a && b ? (Math.SQRT2 * Math.abs(Math.log(b.medianPpm) - Math.log(a.medianPpm))) / Math.sqrt(a.logSd ** 2 + b.logSd ** 2) : 0;
  const strong = deltaBic >= 10 && d > 2 && two.every(({ share }) => share > 0.05);
  const verdict: 'single' | 'suspect' | 'mixed' | 'too-few' = n < 30 ? 'too-few' : strong && (dipP <= 0.05 || d > 3) ? 'mixed' : strong || dipP <= 0.05 ? 'suspect' : 'single';
  const best = mixtures.filter(({ accepted }) => accepted).reduce((m, f) => ((f.bic ?? Infinity) < (m?.bic ?? Infinity) ? f : m), mixtures[0]);
  return { dip, dipP, mixtures, deltaBic, verdict, chosenK: best?.k ?? 1, z: normalQuantile, cdf: normalCdf };
}
