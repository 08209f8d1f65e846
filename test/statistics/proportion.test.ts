import jstat from "jstat";
import { describe, expect, it } from "vitest";
import { betaDistribution } from "../../analysis/statistics/beta.ts";
import { logGamma } from "../../analysis/statistics/log-gamma.ts";
import { normalDistribution, normalQuantile } from "../../analysis/statistics/normal.ts";
import { clopperPearson, rateDifference, wilson } from "../../analysis/statistics/proportion.ts";

const cases = [1, 2, 5, 20, 44, 120, 300, 5000].flatMap((trials) =>
  [0, 1, Math.floor(trials / 5), Math.floor(trials / 2), trials - 1, trials].map((hits) => ({
    hits,
    trials,
  })),
);

describe("intervals of a proportion", () => {
  it("Clopper–Pearson: 4 of 20 at 90 % is 0.0714 to 0.4010 (NIST/SEMATECH e-Handbook 7.2.4.1)", () => {
    const { low, high } = clopperPearson(4, 20, 0.9);
    expect(low).toBeCloseTo(0.0714, 4);
    expect(high).toBeCloseTo(0.401, 4);
  });

  it("Clopper–Pearson agrees with jstat's beta quantiles", () => {
    for (const { hits, trials } of cases) {
      const { low, high } = clopperPearson(hits, trials, 0.95);
      if (hits > 0) expect(low).toBeCloseTo(jstat.beta.inv(0.025, hits, trials - hits + 1), 6);
      if (hits < trials) expect(high).toBeCloseTo(jstat.beta.inv(0.975, hits + 1, trials - hits), 6);
    }
  });

  it("Clopper–Pearson keeps 0 and 1 at the ends: no hits, all hits", () => {
    // Closed form at the ends: 1 − (α/2)^(1/n).
    expect(clopperPearson(0, 30, 0.95)).toEqual({ low: 0, high: expect.closeTo(1 - 0.025 ** (1 / 30), 10) });
    expect(clopperPearson(30, 30, 0.95)).toEqual({ low: expect.closeTo(0.025 ** (1 / 30), 10), high: 1 });
  });

  it("Wilson: its limits solve the score equation, with jstat's normal quantile", () => {
    const z = jstat.normal.inv(0.975, 0, 1);
    for (const { hits, trials } of cases) {
      const rate = hits / trials;
      const { low, high } = wilson(hits, trials, 0.95);
      for (const limit of [low, high])
        if (limit > 1e-12 && limit < 1 - 1e-12)
          expect((rate - limit) ** 2).toBeCloseTo((z * z * limit * (1 - limit)) / trials, 9);
    }
  });

  it("Newcombe's published example: 56 of 70 against 48 of 80 is 0.2 with 0.0524 to 0.3339 (1998, table II; from memory)", () => {
    const difference = rateDifference({ hits: 48, trials: 80 }, { hits: 56, trials: 70 }, 0.95)!;
    expect(difference.value).toBeCloseTo(0.2, 10);
    expect(difference.low).toBeCloseTo(0.0524, 4);
    expect(difference.high).toBeCloseTo(0.3339, 4);
  });

  it("a difference with an empty run is null", () => {
    expect(rateDifference({ hits: 0, trials: 0 }, { hits: 1, trials: 2 }, 0.95)).toBeNull();
  });
});

describe("special functions against jstat", () => {
  it("logarithm of gamma", () => {
    for (const x of [0.1, 0.5, 1, 2.5, 7.9, 40, 3000]) expect(logGamma(x)).toBeCloseTo(jstat.gammaln(x), 8);
  });

  it("incomplete beta, to jstat's own 2e-8 (its I(½; ½, ½) misses the exact ½ by that)", () => {
    for (const [a, b] of [
      [0.5, 0.5],
      [2, 9],
      [40, 3],
      [200, 300],
    ])
      for (const x of [0.01, 0.2, 0.5, 0.9, 0.99])
        expect(betaDistribution(x, a, b)).toBeCloseTo(jstat.beta.cdf(x, a, b), 7);
  });

  it("normal distribution and its quantile", () => {
    for (const z of [-6, -2.6, -1, 0, 0.3, 2.4, 2.6, 5])
      expect(normalDistribution(z)).toBeCloseTo(jstat.normal.cdf(z, 0, 1), 9);
    for (const p of [0.005, 0.025, 0.5, 0.9, 0.995])
      expect(normalQuantile(p)).toBeCloseTo(jstat.normal.inv(p, 0, 1), 7);
  });
});
