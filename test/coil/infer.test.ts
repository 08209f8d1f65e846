import { describe, expect, it } from "vitest";
import { effectiveCapacitance_F } from "../../analysis/coil/secondary.ts";
import { inferTank } from "../../analysis/coil/infer.ts";
import { firstPeakShare, losslessAmplitude_V, ringFrequency_Hz } from "../../analysis/coil/kick.ts";
import { smallestCapacitor_F, swingWith } from "../../analysis/coil/capacitor-choice.ts";
import { propagate, type Input } from "../../analysis/numeric/propagate.ts";

const normal = (value: number, u: number, source = "x"): Input => ({
  source,
  value,
  u,
  distribution: "normal",
});

describe("law of propagation", () => {
  // JCGM 100:2008, example H.2; expected figures recomputed from its rounded inputs (methods.md 8), to 2 %.
  const inputs = [normal(4.999, 0.0032), normal(19.661e-3, 0.0095e-3), normal(1.04446, 0.00075)];
  const r = [
    [1, -0.36, 0.86],
    [-0.36, 1, -0.65],
    [0.86, -0.65, 1],
  ];
  it.each<[string, (x: number[]) => number, number, number]>([
    ["R", ([v, i, p]) => (v / i) * Math.cos(p), 127.732, 0.07],
    ["X", ([v, i, p]) => (v / i) * Math.sin(p), 219.847, 0.296],
    ["Z", ([v, i]) => v / i, 254.26, 0.237],
  ])("JCGM 100 H.2: %s", (_, f, value, u) => {
    const result = propagate(f, inputs, (a, b) => r[a][b]);
    expect(result.value).toBeCloseTo(value, 3);
    expect(Math.abs(result.u / u - 1)).toBeLessThan(0.02);
  });

  it("a wide rectangular input is tried out: rms of 1/x − 1 over 1 ± 0.3 has a closed form", () => {
    const t = 0.3;
    const input: Input = { source: "x", value: 1, u: t / Math.sqrt(3), distribution: "rectangular" };
    const exact = Math.sqrt(1 / (1 - t * t) - Math.log((1 + t) / (1 - t)) / t + 1);
    expect(propagate(([x]) => 1 / x, [input]).u / exact).toBeCloseTo(1, 1);
  });
});

describe("closed forms (methods.md 1)", () => {
  it("7.5 mH and 288 nF interrupted at 3.72 A: 3.42 kHz, lossless kick 600 V", () => {
    expect(ringFrequency_Hz(7.5e-3, 288e-9)).toBeCloseTo(3424.5, 0);
    expect(losslessAmplitude_V(3.72, 7.5e-3, 288e-9)).toBeCloseTo(600.3, 0);
  });

  it("first peak of a ring of Q: the solution of s² + 2αs + ω0² from the switch-off, sampled finely", () => {
    for (const q of [2, 5, 50]) {
      const alpha = 1 / (2 * q);
      const w = Math.sqrt(1 - alpha * alpha);
      let peak = 0;
      for (let t = 0; t < 3; t += 1e-4) peak = Math.max(peak, (Math.exp(-alpha * t) * Math.sin(w * t)) / w);
      expect(firstPeakShare(q)).toBeCloseTo(peak, 6);
    }
  });

  it("the smallest capacitor brings the peak to the limit exactly, and none does below twice the supply", () => {
    const input = {
      inductance_H: { value: 7.5e-3, u: 0 },
      current_A: { value: 3.72, u: 0.01 },
      supply_V: 12,
      on_V: 0.3,
    };
    const c = smallestCapacitor_F(input, 400)!;
    expect(swingWith(input, c, true).peak_V.value).toBeCloseTo(400, 6);
    expect(swingWith(input, c, true).lowest_V).toBeCloseTo(-376, 6);
    expect(swingWith(input, c, false).lowest_V).toBe(-0.7);
    expect(smallestCapacitor_F(input, 23)).toBeNull();
    expect(c.value / ((7.5e-3 * 3.72 ** 2) / 400 ** 2)).toBeCloseTo((400 / 388) ** 2, 2);
  });

  it("a coupled secondary: the lower root of the circuit's own equation, C1 + n²·C2 at tight coupling", () => {
    const [l1, c1, n, c2] = [7.5e-3, 330e-9, 80, 40e-12];
    for (const k of [0.9, 0.96, 0.99]) {
      const w1 = 1 / (l1 * c1);
      const w2 = 1 / (n * n * l1 * c2);
      const square = (w1 + w2 - Math.sqrt((w1 + w2) ** 2 - 4 * (1 - k * k) * w1 * w2)) / (2 * (1 - k * k));
      const byRatio = effectiveCapacitance_F(c1, square, {
        turnsRatio: n,
        secondaryCapacitance_F: c2,
        coupling: k,
      });
      const byInductance = effectiveCapacitance_F(c1, square, {
        secondaryInductance_H: n * n * l1,
        secondaryCapacitance_F: c2,
        coupling: k,
      });
      expect(1 / (byRatio * square) / l1).toBeCloseTo(1, 9);
      expect(1 / (byInductance * square) / l1).toBeCloseTo(1, 9);
    }
    expect(effectiveCapacitance_F(c1, 1, { turnsRatio: n, secondaryCapacitance_F: c2 })).toBeCloseTo(
      c1 + n * n * c2,
      12,
    );
    expect(effectiveCapacitance_F(c1, 1, {})).toBe(c1);
  });
});

describe("L, C and R", () => {
  const ring = {
    frequency_Hz: 3424.5,
    decay_per_s: 500,
    covariance: [0.01, 0, 4] as [number, number, number],
    timeRelative: 1e-4,
  };
  const square = (2 * Math.PI * 3424.5) ** 2 + 500 ** 2;

  it("uses the undamped frequency and splits the uncertainty by source", () => {
    const tank = inferTank(ring, { capacitor_F: { value: 288e-9, tolerance: 0.02 }, strayCapacitance_F: 0 });
    expect(tank.inductance_H!.value).toBeCloseTo(1 / (288e-9 * square), 12);
    expect(tank.resistance_ohm!.value).toBeCloseTo(1000 * tank.inductance_H!.value, 9);
    const of = (source: string) =>
      tank.budget.inductance_H.find((line) => line.source === source)!.u / tank.inductance_H!.value;
    expect(of("capacitor tolerance")).toBeCloseTo(0.02 / Math.sqrt(3), 6);
    expect(of("sample interval")).toBeCloseTo(2e-4, 7);
    expect(of("ring fit")).toBeCloseTo((2 * 0.1) / 3424.5, 6);
  });

  it("with the winding's resistance from the ramp, series and parallel loss are told apart (methods.md 1)", () => {
    const [l, c, rs, rp] = [7.5e-3, 288e-9, 12, 4000];
    // s² + (Rs/L + 1/(Rp·C))·s + (1 + Rs/Rp)/(L·C) = 0
    const decay_per_s = (rs / l + 1 / (rp * c)) / 2;
    const frequency_Hz = Math.sqrt((1 + rs / rp) / (l * c) - decay_per_s ** 2) / (2 * Math.PI);
    const lossy = {
      frequency_Hz,
      decay_per_s,
      covariance: [1e-4, 0, 1e-2] as [number, number, number],
      timeRelative: 0,
    };
    expect(inferTank(lossy, { capacitor_F: c }).inductance_H!.value / l).toBeCloseTo(1 / (1 + rs / rp), 6);
    const told = inferTank(lossy, { capacitor_F: c }, { value: rs, u: 0.01 });
    expect(told.inductance_H!.value / l).toBeCloseTo(1, 5);
  });

  it("from a known inductance the capacitance, from nothing nothing", () => {
    expect(inferTank(ring, { knownInductance_H: 7.5e-3 }).capacitance_F!.value).toBeCloseTo(
      1 / (7.5e-3 * square),
      15,
    );
    expect(inferTank(ring, {})).toMatchObject({
      inductance_H: null,
      capacitance_F: null,
      resistance_ohm: null,
    });
  });
});
