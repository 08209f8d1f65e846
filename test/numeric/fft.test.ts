import fili from "fili";
import { expect, test } from "vitest";
import { powerSpectrum } from "../../analysis/numeric/fft.ts";
import { seeded } from "../reference/random.ts";

// Source: the transform of fili, a general signal-processing library.
test.each([8, 16, 128, 2048])("the power spectrum of %i values is fili's", (n) => {
  const random = seeded(n);
  const count = n - 3;
  const values = Float64Array.from({ length: n }, () => random.normal());
  const out = new Float64Array(n / 2 + 1);
  powerSpectrum(values, count, n, out);
  const { re, im } = new fili.Fft(n).forward(values.fill(0, count), "none");
  for (let k = 0; k <= n / 2; k++) expect(out[k]).toBeCloseTo(re[k] ** 2 + im[k] ** 2, 8);
});
