import { describe, expect, it } from 'vitest';
import { logNormalCdf, normalCdf, normalQuantile } from '#kernels/normal.ts';
import { evenOddsPoint } from '#kernels/populations/even-odds.ts';
import { choosePopulations, fitLognormalMixtures } from '#kernels/populations/lognormal-mixture.ts';
import {
  binned,
  mixtureData,
  spreadOf,
  type MixtureData,
} from '#kernels/populations/mixture-data.ts';
import { emStep, logLikelihood, type NormalComponent } from '#kernels/populations/mixture-em.ts';
import { fitNormalMixture } from '#kernels/populations/normal-mixture.ts';
import { fitSkewedPopulation } from '#kernels/populations/skewed-population.ts';
import { fitTruncatedPopulation } from '#kernels/populations/truncated-population.ts';
import { seededRandom } from '#kernels/random.ts';

/** 700 quantiles of B (median .5, sd .6) and 300 of A (median 8, sd .4) at Hazen positions. */
const quantilesOf = (n: number, median: number, sd: number) =>
  Array.from({ length: n }, (_, i) => Math.log(median) + sd * normalQuantile((i + 0.5) / n));
const TWO = [...quantilesOf(700, 0.5, 0.6), ...quantilesOf(300, 8, 0.4)];

describe('two lognormal populations by deterministic quantiles (computed with independent software)', () => {
  const [one, two, three, four] = fitLognormalMixtures(mixtureData(TWO));

  it('one population: BIC 3500.7047', () => expect(one?.bic).toBeCloseTo(3500.7047, 3));

  it('two populations: parameters, likelihood, BIC and ICL', () => {
    expect(two?.logLik).toBeCloseTo(-1389.2291, 3);
    expect(two?.bic).toBeCloseTo(2812.997, 3);
    expect(two?.icl).toBeCloseTo(2828.78, 2);
    const [b, a] = two?.components ?? [];
    expect(b?.share).toBeCloseTo(0.69997, 4);
    expect(b?.median).toBeCloseTo(0.500034, 4);
    expect(b?.logSd).toBeCloseTo(0.599785, 4);
    expect(a?.median).toBeCloseTo(7.996539, 3);
    expect(a?.logSd).toBeCloseTo(0.400025, 4);
  });

  it('three populations: BIC 2833.71 +- .01, four no better, two chosen', () => {
    expect(Math.abs((three?.bic ?? NaN) - 2833.71)).toBeLessThan(0.01);
    expect(four?.bic).toBeGreaterThan(2833.7);
    expect(choosePopulations([one, two, three, four].flatMap((fit) => fit ?? []))).toBe(two);
  });
});

it('equal density of .3 of (8, .4) and .7 of (.5, .6) lies at 2.742512 (computed)', () => {
  const a = { share: 0.3, mean: Math.log(8), sd: 0.4 };
  const b = { share: 0.7, mean: Math.log(0.5), sd: 0.6 };
  expect(Math.exp(evenOddsPoint(a, b) ?? NaN)).toBeCloseTo(2.742512, 6);
  expect(evenOddsPoint(b, a)).toBe(evenOddsPoint(a, b));
});

it('even odds: midway for equal spreads and shares, none when one outweighs the other', () => {
  expect(evenOddsPoint({ share: 0.5, mean: 0, sd: 1 }, { share: 0.5, mean: 2, sd: 1 })).toBeCloseTo(
    1,
    12,
  );
  expect(
    evenOddsPoint({ share: 0.99, mean: 0, sd: 1 }, { share: 0.01, mean: 0.5, sd: 1 }),
  ).toBeNull();
  expect(evenOddsPoint({ share: 0.5, mean: 1, sd: 1 }, { share: 0.5, mean: 1, sd: 2 })).toBeNull();
});

describe('EM', () => {
  const random = seededRandom(6);
  const y = Float64Array.from(
    { length: 400 },
    () => (random.uniform() < 0.4 ? 2 : 0) + random.normal(),
  );
  const data = mixtureData(
    y.filter((v) => v > -1),
    y.filter((v) => v <= -1).map(() => -1),
  );
  const limits = { minSd: 0.01, shared: false };

  it('the likelihood never falls, with values below a limit', () => {
    let components: NormalComponent[] = [
      { share: 0.5, mean: -1, sd: 1 },
      { share: 0.5, mean: 3, sd: 1 },
    ];
    let last = -Infinity;
    for (let step = 0; step < 60; step++) {
      const next = emStep(data, components, limits);
      expect(next.logLik).toBeGreaterThanOrEqual(last - 1e-9);
      last = next.logLik;
      components = next.components;
    }
    expect(components.reduce((sum, c) => sum + c.share, 0)).toBeCloseTo(1, 12);
  });

  it('a censored likelihood is that of its definition', () => {
    const components = [
      { share: 0.3, mean: 0.2, sd: 1.1 },
      { share: 0.7, mean: 2, sd: 0.6 },
    ];
    const density = (v: number) =>
      components.reduce(
        (sum, c) =>
          sum +
          (c.share / c.sd / Math.sqrt(2 * Math.PI)) * Math.exp(-0.5 * ((v - c.mean) / c.sd) ** 2),
        0,
      );
    const below = components.reduce((sum, c) => sum + c.share * normalCdf((-1 - c.mean) / c.sd), 0);
    const direct = y.reduce((sum, v) => sum + Math.log(v > -1 ? density(v) : below), 0);
    expect(logLikelihood(data, components)).toBeCloseTo(direct, 8);
  });

  it.each([2, 9, 20])('the likelihood of %d equal components is that of one', (k) => {
    const alone = [{ share: 1, mean: 0.5, sd: 1.2 }];
    const equal = Array.from({ length: k }, () => ({ share: 1 / k, mean: 0.5, sd: 1.2 }));
    expect(logLikelihood(data, equal)).toBeCloseTo(logLikelihood(data, alone), 8);
  });

  it('one censored normal: mean and spread near the truth, far from those of substitution', () => {
    const draw = seededRandom(14);
    const all = Float64Array.from({ length: 4000 }, () => 1 + 0.8 * draw.normal());
    const limit = 0.6;
    const censored = mixtureData(
      all.filter((v) => v > limit),
      all.filter((v) => v <= limit).map(() => limit),
    );
    const [c] = fitNormalMixture(censored, 1).components;
    expect(Math.abs((c?.mean ?? NaN) - 1)).toBeLessThan(0.05);
    expect(Math.abs((c?.sd ?? NaN) - 0.8)).toBeLessThan(0.04);
    const score = (mean: number, sd: number) => logLikelihood(censored, [{ share: 1, mean, sd }]);
    const best = score(c?.mean ?? NaN, c?.sd ?? NaN);
    for (const d of [-0.01, 0.01]) {
      expect(score((c?.mean ?? NaN) + d, c?.sd ?? NaN)).toBeLessThan(best);
      expect(score(c?.mean ?? NaN, (c?.sd ?? NaN) + d)).toBeLessThan(best);
    }
    expect(best).toBeLessThan(censored.n * logNormalCdf(9)); // a log-likelihood, not a density ratio
  });
});

describe('fits', () => {
  it('integer weights act as repeated rows, scaled to the effective number', () => {
    const random = seededRandom(31);
    const y = Float64Array.from(
      { length: 300 },
      (_, i) => (i % 3 === 0 ? 3 : 0) + 0.5 * random.normal(),
    );
    const plain = fitNormalMixture(mixtureData(y), 2);
    const doubled = fitNormalMixture(mixtureData(y, [], new Float64Array(300).fill(2)), 2);
    expect(doubled.logLik).toBeCloseTo(plain.logLik, 6);
    expect(doubled.bic).toBeCloseTo(plain.bic, 6);
    const weights = Float64Array.from(y, (_, i) => 1 + (i % 2));
    expect(mixtureData(y, [], weights).n).toBeCloseTo(450 ** 2 / (150 + 150 * 4), 9);
  });

  it('bins beyond 5,000 rows and still reports the likelihood of all rows', () => {
    const random = seededRandom(8);
    const y = Float64Array.from(
      { length: 12_000 },
      () => (random.uniform() < 0.25 ? 2.5 : 0) + 0.7 * random.normal(),
    );
    const data = mixtureData(y);
    const fit = fitNormalMixture(data, 2);
    expect(fit.logLik).toBeCloseTo(logLikelihood(data, fit.components), 9);
    const step = emStep(data, fit.components, { minSd: 1e-3, shared: false });
    expect(logLikelihood(data, step.components) - fit.logLik).toBeLessThan(1e-3); // at rest on the points too
    expect(fit.components[1]?.mean).toBeCloseTo(2.5, 1);
  });

  it('binning keeps weight, mean and variance', () => {
    const random = seededRandom(3);
    const data = mixtureData(Float64Array.from({ length: 3000 }, () => random.normal()));
    const bins = binned(data, 50);
    expect(bins.y.length).toBeLessThanOrEqual(50);
    expect(spreadOf(bins).mean).toBeCloseTo(spreadOf(data).mean, 12);
    expect(spreadOf(bins).sd).toBeCloseTo(spreadOf(data).sd, 12);
    expect(spreadOf(bins).total).toBeCloseTo(3000, 9);
  });

  it('gives the same fit for the same seed', () => {
    expect(fitNormalMixture(mixtureData(TWO), 2, { seed: 4 })).toEqual(
      fitNormalMixture(mixtureData(TWO), 2, { seed: 4 }),
    );
  });

  it('rejects a population on tied values and one too small', () => {
    const random = seededRandom(10);
    const spread = Array.from({ length: 200 }, () => random.normal());
    const tied = fitLognormalMixtures(
      mixtureData([...spread, ...new Array<number>(100).fill(4)]),
      2,
    )[1];
    expect(tied).toMatchObject({
      accepted: false,
      note: expect.stringContaining('narrower than 0.05'),
    });
    const few = fitLognormalMixtures(
      mixtureData([...spread.map((v) => 0.3 * v), 9, 9.5, 10]),
      2,
    )[1];
    expect(few).toMatchObject({
      accepted: false,
      note: expect.stringContaining('below the least share'),
    });
  });

  it('gives no fit of more populations than different values', () => {
    const found = fitLognormalMixtures(mixtureData([0, 0, 1, 1]), 4);
    expect(found.map((fit) => fit.accepted)).toEqual([true, expect.any(Boolean), false, false]);
    expect(found[3]).toMatchObject({ bic: null, note: 'only 2 different values' });
  });
});

describe('single populations of other form', () => {
  const random = seededRandom(77);
  const draws = (n: number, draw: () => number): MixtureData =>
    mixtureData(Float64Array.from({ length: n }, draw));

  it('finds power 0 for lognormal and 1 for normal grades', () => {
    expect(
      Math.abs(fitSkewedPopulation(draws(5000, () => 2 + 0.7 * random.normal())).power),
    ).toBeLessThan(0.05);
    expect(
      Math.abs(
        fitSkewedPopulation(draws(5000, () => Math.log(Math.max(0.01, 5 + random.normal()))))
          .power - 1,
      ),
    ).toBeLessThan(0.25);
  });

  it('at power 0 its likelihood is that of the lognormal', () => {
    const symmetric = quantilesOf(501, 3, 0.5);
    const { power, logLik } = fitSkewedPopulation(mixtureData(symmetric));
    expect(Math.abs(power)).toBeLessThan(1e-3);
    expect(logLik).toBeCloseTo(fitNormalMixture(mixtureData(symmetric), 1).logLik, 4);
  });

  it('an even spread of ln grade is n ln of its range, cut off at both ends', () => {
    const even = Array.from({ length: 401 }, (_, i) => i / 100);
    const { logLik, from, to } = fitTruncatedPopulation(mixtureData(even));
    expect([from, to]).toEqual([0, 4]);
    expect(logLik).toBeCloseTo(-401 * Math.log(4), 3);
  });

  it('beats a mixture on a population cut off at its median, and loses on two populations', () => {
    const cut = draws(600, () => 0.8 * Math.abs(random.normal()));
    expect(fitTruncatedPopulation(cut).bic).toBeLessThan(
      fitLognormalMixtures(cut, 2)[1]?.bic ?? NaN,
    );
    expect(fitTruncatedPopulation(mixtureData(TWO)).bic).toBeGreaterThan(
      (fitLognormalMixtures(mixtureData(TWO), 2)[1]?.bic ?? NaN) + 100,
    );
  });
});

it.each([
  ['too-few-rows', () => mixtureData([])],
  ['not-finite', () => mixtureData([1, NaN])],
  ['not-finite', () => mixtureData([1], [-Infinity])],
  ['shape', () => mixtureData([1, 2], [], [1])],
  ['bad-parameter', () => mixtureData([1, 2], [], [1, -1])],
  ['too-few-rows', () => mixtureData([1], [2], [0, 1])],
  ['bad-parameter', () => fitNormalMixture(mixtureData([1, 2, 3]), 0)],
  ['too-few-rows', () => fitNormalMixture(mixtureData([1, 1, 1]), 1)],
  ['too-few-rows', () => fitNormalMixture(mixtureData([1, 2]), 3)],
  ['bad-parameter', () => fitLognormalMixtures(mixtureData([1, 2, 3]), 5)],
  ['too-few-rows', () => fitLognormalMixtures(mixtureData([1, 1]))],
  ['too-few-rows', () => choosePopulations([])],
  ['too-few-rows', () => fitSkewedPopulation(mixtureData([1, 1]))],
  ['too-few-rows', () => fitTruncatedPopulation(mixtureData([1, 1]))],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
