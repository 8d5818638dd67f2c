import { screenPopulation } from '#kernels/populations/screen-population.ts';
import { seededRandom, type Random } from '#kernels/random.ts';

/**
 * How often the mixing verdict is right on generated truth: mixtures of two lognormal populations of
 * equal spread over separation x share x n, and single populations of many forms.
 *
 * Run: `node --import tsx tests/bench/verdict-power.ts [seeds, default 20] [n,n,..]`. Each line gives the
 * share of runs called mixed and, after the stroke, mixed or suspect.
 */
type Draw = (random: Random) => number;

const LOG_SD = 0.7;
const mixture =
  (separation: number, share: number): Draw =>
  (random) =>
    Math.exp((random.uniform() < share ? separation * LOG_SD : 0) + LOG_SD * random.normal());

/** Gamma variate by Marsaglia and Tsang's squeeze (2000, from memory). */
function gamma(shape: number, random: Random): number {
  if (shape < 1) return gamma(shape + 1, random) * random.uniform() ** (1 / shape);
  const d = shape - 1 / 3;
  for (;;) {
    const x = random.normal();
    const v = (1 + x / Math.sqrt(9 * d)) ** 3;
    if (v > 0 && Math.log(1 - random.uniform()) < 0.5 * x * x + d - d * v + d * Math.log(v))
      return d * v;
  }
}

/** Standard normal beyond a point. */
function normalAbove(least: number, random: Random): number {
  for (;;) {
    const z = random.normal();
    if (z > least) return z;
  }
}

const SINGLES: Readonly<Record<string, Draw>> = {
  lognormal: (random) => Math.exp(0.8 * random.normal()),
  'lognormal, wide': (random) => Math.exp(1.6 * random.normal()),
  'exponential grade': (random) => -Math.log(1 - random.uniform()),
  'gamma grade, shape .5': (random) => gamma(0.5, random),
  'normal grade, CV .3': (random) => Math.max(0.02, 1 + 0.3 * random.normal()),
  'heavy-tailed ln grade (t, 5 df)': (random) =>
    Math.exp(random.normal() / Math.sqrt(gamma(2.5, random) / 2.5)),
  'cut off at its median': (random) => Math.exp(0.8 * normalAbove(0, random)),
  'cut off at its 80th percentile': (random) => Math.exp(0.8 * normalAbove(0.8416, random)),
  'even in ln grade': (random) => Math.exp(2 * random.uniform()),
  'rounded to .01 at median .05': (random) =>
    Math.max(0.01, Math.round(5 * Math.exp(0.8 * random.normal())) / 100),
  'mean of three lognormals': (random) =>
    [1, 2, 3].reduce((sum) => sum + Math.exp(1.2 * random.normal()) / 3, 0),
};

function rate(draw: Draw, n: number, seeds: number): string {
  let mixed = 0;
  let flagged = 0;
  for (let seed = 1; seed <= seeds; seed++) {
    const random = seededRandom(1000 * seed + n);
    const grades = Float64Array.from({ length: n }, () => draw(random));
    const { verdict } = screenPopulation(grades, null, null, { maxPopulations: 3 });
    mixed += verdict === 'mixed' ? 1 : 0;
    flagged += verdict === 'mixed' || verdict === 'suspect' ? 1 : 0;
  }
  const percent = (count: number) => String(Math.round((100 * count) / seeds)).padStart(3);
  return `${percent(mixed)} /${percent(flagged)}`;
}

const seeds = Number(process.argv[2] ?? 20);
const sizes = (process.argv[3] ?? '60,300,1000,5000').split(',').map(Number);
const line = (label: string, draw: Draw) =>
  console.log(label.padEnd(34), sizes.map((n) => rate(draw, n, seeds)).join('   '));

console.log(
  ''.padEnd(34),
  sizes.map((n) => `n ${n}`.padEnd(8)).join('   '),
  ` (% mixed / % mixed or suspect, ${seeds} runs each)`,
);
for (const separation of [2, 2.5, 3, 4, 5]) {
  for (const share of [0.05, 0.1, 0.3, 0.5])
    line(`separation ${separation}, share ${share}`, mixture(separation, share));
}
for (const [name, draw] of Object.entries(SINGLES)) line(name, draw);
