import { describe, expect, it } from "vitest";
import { changePoint } from "../../analysis/statistics/change-point.ts";
import { driftOf } from "../../analysis/statistics/drift.ts";
import { fitWeibull } from "../../analysis/statistics/weibull.ts";
import { seeded } from "../reference/random.ts";

/** Samples by inversion of the distribution function; those above `limit` are only known to hold. */
function weibullSample(seed: number, n: number, shape: number, scale: number, limit: number) {
  const random = seeded(seed);
  const all = Array.from({ length: n }, () => scale * (-Math.log(1 - random.uniform())) ** (1 / shape));
  return {
    broke: all.filter((value) => value <= limit),
    held: all.filter((value) => value > limit).map(() => limit),
  };
}

const holds = (value: number, { low, high }: { low: number; high: number }) => low <= value && value <= high;

describe("Weibull fit of breakdown voltages", () => {
  it("recovers known parameters of simulated samples; its 95 % bounds hold them in 91 to 98 %", () => {
    let [shapeHeld, scaleHeld, quantileHeld] = [0, 0, 0];
    const trials = 400;
    const tenth = 12_000 * (-Math.log(0.9)) ** (1 / 9);
    for (let seed = 0; seed < trials; seed++) {
      const { broke, held } = weibullSample(seed, 60, 9, 12_000, 13_000);
      expect(held.length).toBeGreaterThan(0);
      const fit = fitWeibull(broke, held)!;
      if (holds(9, fit.shape)) shapeHeld++;
      if (holds(12_000, fit.scale)) scaleHeld++;
      if (holds(tenth, fit.quantile(0.1))) quantileHeld++;
    }
    for (const held of [shapeHeld, scaleHeld, quantileHeld]) {
      expect(held / trials).toBeGreaterThan(0.91);
      expect(held / trials).toBeLessThan(0.98);
    }
  });

  it("dropping the pulses that held would bias the scale; keeping them as censored does not", () => {
    const { broke, held } = weibullSample(7, 4000, 6, 10_000, 9_500);
    expect(fitWeibull(broke, held)!.scale.value / 10_000).toBeCloseTo(1, 1.7);
    expect(fitWeibull(broke, [])!.scale.value).toBeLessThan(9_000);
  });

  it("solves the likelihood equations: no neighbour is likelier", () => {
    const { broke, held } = weibullSample(3, 50, 4, 20, 25);
    const fit = fitWeibull(broke, held)!;
    const likelihood = (shape: number, scale: number) =>
      broke.reduce((sum, x) => sum + Math.log(shape / scale) + (shape - 1) * Math.log(x / scale), 0) -
      [...broke, ...held].reduce((sum, x) => sum + (x / scale) ** shape, 0);
    const best = likelihood(fit.shape.value, fit.scale.value);
    for (const [a, b] of [
      [1.01, 1],
      [0.99, 1],
      [1, 1.01],
      [1, 0.99],
    ])
      expect(likelihood(fit.shape.value * a, fit.scale.value * b)).toBeLessThan(best);
  });

  it("is null with fewer than three breakdowns or when all are equal", () => {
    expect(fitWeibull([1, 2], [3, 4])).toBeNull();
    expect(fitWeibull([5, 5, 5, 5], [])).toBeNull();
  });
});

describe("drift", () => {
  it("agrees with the textbook line through exact points and says no drift of a flat one", () => {
    const line = driftOf([0, 1, 2, 3].map((x) => ({ x, value: 2 + 3 * x, u: 0.1 })))!;
    expect(line.slope.value).toBeCloseTo(3, 12);
    expect(line.slope.u).toBeCloseTo(0.1 / Math.sqrt(5), 12);
    expect(line.drifts).toBe(true);
    expect(driftOf([0, 1, 2, 3].map((x) => ({ x, value: 2 + (x % 2) * 0.1, u: 0.1 })))!.drifts).toBe(false);
  });

  it("slope's uncertainty holds over seeded trials, also where the stated one is too small", () => {
    let held = 0;
    for (let seed = 0; seed < 300; seed++) {
      const random = seeded(seed);
      const points = Array.from({ length: 25 }, (_, x) => ({
        x,
        value: 0.4 * x + 3 * random.normal(),
        u: 1,
      }));
      const { slope } = driftOf(points)!;
      if (Math.abs(slope.value - 0.4) < 2 * slope.u) held++;
    }
    expect(held / 300).toBeGreaterThan(0.9);
  });
});

describe("change point", () => {
  it("finds the step and its levels, and finds none in steady series more often than it says", () => {
    const random = seeded(5);
    const step = Array.from({ length: 40 }, (_, i) => (i < 23 ? 10 : 12) + 0.5 * random.normal());
    const found = changePoint(step)!;
    expect(Math.abs(found.index - 23)).toBeLessThanOrEqual(1);
    expect(found.after - found.before).toBeCloseTo(2, 0);
    let alarms = 0;
    for (let seed = 0; seed < 500; seed++) {
      const steady = seeded(seed + 100);
      if (changePoint(Array.from({ length: 30 }, () => steady.normal()))) alarms++;
    }
    expect(alarms / 500).toBeLessThan(0.02);
  });

  it("is null with fewer than eight values", () => {
    expect(changePoint([0, 0, 0, 0, 9, 9, 9])).toBeNull();
  });
});
