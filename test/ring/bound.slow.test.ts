import { expect, it } from "vitest";
import { ringTrial, twoModeTrial, wholeRange } from "../reference/ring-set.ts";
import { scoreRings, series } from "../reference/ring-score.ts";
import { fitRing } from "../../analysis/ring/fit.ts";

it("3,000 rings: at the bound, uncertainties that hold, nothing missed or invented", () => {
  const score = scoreRings(series(3000, 10_000, (seed) => ringTrial(seed)));
  expect(score.frequency.rms).toBeLessThanOrEqual(1.05);
  expect(score.decay.rms).toBeLessThanOrEqual(1.05);
  expect(Math.abs(score.frequency.bias)).toBeLessThanOrEqual(0.15);
  expect(Math.abs(score.decay.bias)).toBeLessThanOrEqual(0.15);
  for (const share of [score.frequency, score.decay, score.q, score.inductance]) {
    expect(share.within2u).toBeGreaterThanOrEqual(0.93);
    expect(share.within2u).toBeLessThanOrEqual(0.97);
  }
  expect(score).toMatchObject({ missed: 0, invented: 0 });
  expect(score.inventedModes).toBeLessThanOrEqual(30);
});

it("noise below half an LSB: uncertainties hold in at least 93 %", () => {
  const coarse = { ...wholeRange, leastNoise_lsb: 0.02 };
  const score = scoreRings(series(1500, 60_000, (seed) => ringTrial(seed, coarse)));
  for (const share of [score.frequency, score.decay, score.q, score.inductance])
    expect(share.within2u).toBeGreaterThanOrEqual(0.93);
});

it("a second mode is found in at least 95 % of 1,000", () => {
  const trials = [...series(1000, 5000, (seed) => twoModeTrial(seed, [8, 60]))].filter(
    ({ strength }) => strength >= 8,
  );
  const found = trials.filter(
    (trial) =>
      fitRing(trial.samples, trial.first, trial.samples.length, trial.step_s, { lsb: trial.lsb })?.modes
        .length === 2,
  );
  expect(found.length / trials.length).toBeGreaterThanOrEqual(0.95);
});
