import { describe, expect, it } from "vitest";
import { ringTrial, twoModeTrial, ringBound } from "../reference/ring-set.ts";
import { scoreRings, series } from "../reference/ring-score.ts";
import { fitRing } from "../../analysis/ring/fit.ts";

// Few trials, so the limits are those of the full set (slow suite) plus three standard deviations of
// the count: a root mean square of n values scatters by 1/√(2n), a share p by √(p(1 − p)/n).
describe("rings read end to end against the Cramér–Rao bound", () => {
  const n = 400;
  const score = scoreRings(series(n, 1, (seed) => ringTrial(seed)));

  it("errors of frequency and decay are at the bound", () => {
    const limit = 1.05 * (1 + 3 / Math.sqrt(2 * n));
    expect(score.frequency.rms).toBeLessThan(limit);
    expect(score.decay.rms).toBeLessThan(limit);
  });

  it("two standard uncertainties hold in 93 to 97 % of cases", () => {
    for (const share of [score.frequency, score.decay, score.q, score.inductance]) {
      expect(share.within2u).toBeGreaterThan(0.93 - 3 * Math.sqrt((0.05 * 0.95) / n));
      expect(share.within2u).toBeLessThan(0.97 + 3 * Math.sqrt((0.05 * 0.95) / n));
    }
  });

  it("no switch-off is missed or invented, and each is within a twentieth of a period", () => {
    expect(score).toMatchObject({ missed: 0, invented: 0 });
    expect(score.worstInstant_periods).toBeLessThan(0.05);
  });

  it("hardly ever is a second mode invented", () =>
    expect(score.inventedModes / n).toBeLessThanOrEqual(0.01));
});

describe("two modes", () => {
  it("a second mode of 8 σ and more, 1.5/window away, is found with both at the bound", () => {
    const ratios: number[][] = [[], [], [], []];
    let found = 0;
    const trials = [...series(120, 1, (seed) => twoModeTrial(seed))].filter((trial) => trial.strength >= 8);
    for (const trial of trials) {
      const fit = fitRing(trial.samples, trial.first, trial.samples.length, trial.step_s, { lsb: trial.lsb });
      if (fit?.modes.length !== 2) continue;
      found++;
      const bound = ringBound(trial);
      trial.modes.forEach((mode, m) => {
        ratios[2 * m].push((fit.modes[m].frequency_Hz - mode.frequency_Hz) / bound.frequency_Hz[m]);
        ratios[2 * m + 1].push((fit.modes[m].decay_per_s - mode.decay_per_s) / bound.decay_per_s[m]);
      });
    }
    expect(found / trials.length).toBeGreaterThanOrEqual(0.95);
    for (const z of ratios) expect(Math.sqrt(z.reduce((s, x) => s + x * x, 0) / z.length)).toBeLessThan(1.25);
  });
});
