import { inverse as mlInverse, Matrix } from "ml-matrix";
import { describe, expect, it } from "vitest";
import { addExponentialSums } from "../../analysis/numeric/exponential-sums.ts";
import { inverse } from "../../analysis/numeric/cholesky.ts";
import { powerSpectrum } from "../../analysis/numeric/fft.ts";
import { makeBlocks } from "../../analysis/ring/blocks.ts";
import { fitRing } from "../../analysis/ring/fit.ts";
import { costAt, solve } from "../../analysis/ring/solve.ts";
import { ringBound, ringTrial } from "../reference/ring-set.ts";
import { seeded } from "../reference/random.ts";

describe("sums in closed form", () => {
  it.each([
    [-0.01, 0.3, 0, 1],
    [-0.002, 1.9, 17, 4000],
    [0, 0, 5, 300],
    [0.0005, 3.1, 0, 1023],
  ])("Σ i^k·w^i, log w = %f + %f j over [%i, %i), against term by term", (re, im, from, to) => {
    const outRe = new Float64Array(7);
    const outIm = new Float64Array(7);
    addExponentialSums(re, im, from, to, 6, outRe, outIm);
    for (let k = 0; k <= 6; k++) {
      let sumRe = 0;
      let sumIm = 0;
      let size = 0;
      for (let i = from; i < to; i++) {
        const e = i ** k * Math.exp(re * i);
        sumRe += e * Math.cos(im * i);
        sumIm += e * Math.sin(im * i);
        size += e;
      }
      expect(Math.abs(outRe[k] - sumRe)).toBeLessThan(1e-10 * size + 1e-12);
      expect(Math.abs(outIm[k] - sumIm)).toBeLessThan(1e-10 * size + 1e-12);
    }
    const shortRe = new Float64Array(3);
    const shortIm = new Float64Array(3);
    addExponentialSums(re, im, from, to, 2, shortRe, shortIm);
    for (let k = 0; k < 3; k++)
      expect(shortRe[k]).toBeCloseTo(outRe[k], 6 - Math.ceil(Math.log10(1 + Math.abs(outRe[k]))) + 6);
  });
});

describe("linear algebra and transform against references", () => {
  it("inverse of a badly scaled definite matrix agrees with ml-matrix", () => {
    const random = seeded(4);
    const n = 9;
    const scale = Array.from({ length: n }, () => 10 ** random.between(-4, 4));
    const rows = Array.from({ length: 40 }, () => scale.map((s) => s * random.normal()));
    const gram = Matrix.zeros(n, n);
    for (const row of rows)
      for (let r = 0; r < n; r++)
        for (let c = 0; c < n; c++) gram.set(r, c, gram.get(r, c) + row[r] * row[c]);
    const own = inverse(Float64Array.from(gram.to1DArray()), n)!;
    const reference = mlInverse(gram).to1DArray();
    for (let k = 0; k < n * n; k++) {
      const size = Math.sqrt(reference[Math.floor(k / n) * (n + 1)] * reference[(k % n) * (n + 1)]);
      expect(Math.abs(own[k] - reference[k])).toBeLessThan(1e-8 * size);
    }
  });

  it("a matrix that is not definite is refused, not inverted", () => {
    expect(inverse(Float64Array.from([1, 1, 1, 1]), 2)).toBeNull();
  });

  it.each([8, 64, 1024])("power spectrum of %i values agrees with the definition", (n) => {
    const random = seeded(n);
    const y = Float64Array.from({ length: n }, () => random.normal());
    const out = new Float64Array(n / 2 + 1);
    powerSpectrum(y, n - 3, n, out);
    for (const k of [0, 1, 2, n / 4, n / 2 - 1, n / 2]) {
      let re = 0;
      let im = 0;
      for (let i = 0; i < n - 3; i++) {
        re += y[i] * Math.cos((2 * Math.PI * k * i) / n);
        im += y[i] * Math.sin((2 * Math.PI * k * i) / n);
      }
      expect(out[k]).toBeCloseTo(re * re + im * im, 8);
    }
  });
});

describe("the separable fit", () => {
  const y = Float64Array.from(
    { length: 900 },
    (_, i) =>
      7 +
      50 * Math.exp(-2e-3 * i) * Math.cos(0.11 * i + 0.4) +
      9 * Math.exp(-6e-3 * i) * Math.cos(0.5 * i - 1),
  );
  const exact = [
    { omega: 0.11, decay: 2e-3 },
    { omega: 0.5, decay: 6e-3 },
  ];

  it("leaves nothing at the true modes and finds them from 2 % away", () => {
    const blocks = makeBlocks(y, 0, y.length, [], 1);
    expect(costAt(blocks, exact, 0)).toBeLessThan(1e-9 * blocks.power);
    const found = solve(
      blocks,
      exact.map(({ omega, decay }) => ({ omega: omega * 1.002, decay: decay * 1.2 })),
      0,
    );
    expect(found.stopped).toBe("converged");
    found.modes.forEach((mode, m) => {
      expect(mode.omega).toBeCloseTo(exact[m].omega, 8);
      expect(mode.decay).toBeCloseTo(exact[m].decay, 8);
    });
  });

  it("its analytic derivative is that of finite differences: the minimum is where costs rise all round", () => {
    const blocks = makeBlocks(y, 0, y.length, [200, 260], 1);
    const { modes, cost } = solve(blocks, exact, 0);
    for (let m = 0; m < 2; m++)
      for (const key of ["omega", "decay"] as const)
        for (const by of [-1e-5, 1e-5]) {
          const moved = modes.map((mode, k) => (k === m ? { ...mode, [key]: mode[key] + by } : mode));
          expect(costAt(blocks, moved, 0)).toBeGreaterThan(cost);
        }
  });

  it("averaging and missing stretches leave the exact answer", () => {
    const fit = fitRing(y, 0, y.length, 1e-6, { unusable: [100, 180, 500, 503] })!;
    expect(fit.modes[0].frequency_Hz).toBeCloseTo(0.11 / (2 * Math.PI * 1e-6), 2);
    const long = Float64Array.from(
      { length: 9000 },
      (_, i) => 7 + 50 * Math.exp(-2e-4 * i) * Math.cos(0.011 * i + 0.4),
    );
    const averaged = fitRing(long, 0, long.length, 1e-6, {})!;
    expect(averaged.decimation).toBeGreaterThan(4);
    expect(averaged.modes[0].frequency_Hz * 2 * Math.PI * 1e-6).toBeCloseTo(0.011, 9);
    expect(averaged.modes[0].cosine).toBeCloseTo(50 * Math.cos(0.4), 5);
    expect(averaged.modes[0].sine).toBeCloseTo(-50 * Math.sin(0.4), 5);
    expect(averaged.baseline[0]).toBeCloseTo(7, 6);
  });

  it("the same record in s, ms and µs gives the same ring", () => {
    const trial = ringTrial(11);
    const fits = [1, 1e3, 1e6].map((unit) =>
      fitRing(trial.samples, trial.first, trial.samples.length, trial.step_s * unit, { lsb: trial.lsb })!,
    );
    fits.forEach((fit, k) => {
      const unit = 1e3 ** k;
      expect((fit.modes[0].frequency_Hz * unit) / fits[0].modes[0].frequency_Hz).toBeCloseTo(1, 10);
      expect((Math.sqrt(fit.covariance[0]) * unit) / Math.sqrt(fits[0].covariance[0])).toBeCloseTo(1, 8);
    });
  });

  it("its stated uncertainty is the Cramér–Rao bound of the Fisher matrix (ml-matrix)", () => {
    const ratios = Array.from({ length: 60 }, (_, k) => {
      const trial = ringTrial(100 + k);
      const fit = fitRing(trial.samples, trial.first, trial.samples.length, trial.step_s, {
        lsb: trial.lsb,
      })!;
      return Math.sqrt(fit.covariance[0]) / ringBound(trial).frequency_Hz[0];
    });
    const mean = ratios.reduce((a, b) => a + b) / ratios.length;
    expect(mean).toBeGreaterThan(0.96);
    expect(mean).toBeLessThan(1.04);
  });
});

describe("what is no ring", () => {
  const random = seeded(9);
  it.each([
    ["noise", () => random.normal()],
    ["a level", () => 5],
    ["nothing but blanks", () => NaN],
  ])("%s gives no fit", (_, f) => {
    const y = Float64Array.from({ length: 2000 }, f);
    const unusable = Number.isNaN(y[0]) ? [0, 2000] : [];
    expect(fitRing(y, 0, y.length, 1e-6, { unusable })).toBeNull();
  });

  it("too short a window gives no fit", () => {
    expect(fitRing(Float64Array.from([1, 2, 3, 2, 1]), 0, 5, 1e-6)).toBeNull();
  });
});
