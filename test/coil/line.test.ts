import { describe, expect, it } from "vitest";
import { addedCapacitorLine, weightedLine } from "../../analysis/coil/added-capacitor.ts";
import { currentForEnergy_A, dwellTable, timeToCurrent } from "../../analysis/coil/dwell.ts";
import { coilFromCaptures } from "../../analysis/coil/line.ts";
import { readCapture } from "../../analysis/reading.ts";
import { captureOf, scoped } from "../reference/captures.ts";
import { seeded } from "../reference/random.ts";
import { runBench } from "../reference/switched-coil.ts";

const L = 7.5e-3;
const SELF = 1.8e-9;
const R = 2;
const capacitors = [10e-9, 22e-9, 47e-9, 100e-9];

/** Closed form: 1/ω0² = L·(C + C_self), 2α = Rs/L + 1/(Rp·C). */
const points = (rp: number, wrong = -1) =>
  capacitors.map((c, capture) => {
    const total = (capture === wrong ? c * 1.1 : c) + SELF;
    const value = L * total;
    const decay = (R / L + 1 / (rp * total)) / 2;
    return {
      capture,
      capacitor_F: { value: c, u: 0.003 * c },
      stray_F: 0,
      inverseSquare_s2: { value, u: 1e-5 * value },
      decay_per_s: { value: decay, u: 1e-4 * decay },
    };
  });

describe("added-capacitor line", () => {
  it("gives L, self-capacitance, series and parallel loss of the closed form", () => {
    const line = addedCapacitorLine(points(200e3));
    expect(line.inductance_H!.value).toBeCloseTo(L, 9);
    expect(line.selfCapacitance_F!.value).toBeCloseTo(SELF, 14);
    expect(line.seriesResistance_ohm!.value).toBeCloseTo(R, 6);
    expect(line.parallelResistance_ohm!.value).toBeCloseTo(200e3, 0);
    expect(line.points.some((point) => point.flagged)).toBe(false);
  });

  it("flags the capture that does not fit and leaves it out", () => {
    const line = addedCapacitorLine(points(200e3, 2));
    expect(line.points.map((point) => point.flagged)).toEqual([false, false, true, false]);
    expect(line.inductance_H!.value).toBeCloseTo(L, 6);
  });

  it("one capacitor only: null with the reason", () => {
    const line = addedCapacitorLine(points(200e3).slice(0, 1));
    expect(line.inductance_H).toBeNull();
    expect(line.reason).toContain("different capacitors");
  });

  it("the weighted line is that of the textbook formula for equal weights", () => {
    const x = [1, 2, 3, 5].map((value) => ({ value, u: 0 }));
    const y = [2.1, 3.9, 6.2, 9.8].map((value) => ({ value, u: 1 }));
    const line = weightedLine(x, y);
    // Σ(x − x̄)(y − ȳ)/Σ(x − x̄)², x̄ = 2.75, ȳ = 5.5: 17/8.75.
    expect(line.slope).toBeCloseTo(17 / 8.75, 6);
    expect(line.intercept).toBeCloseTo(5.5 - (17 / 8.75) * 2.75, 6);
  });
});

describe("a coil from captures", () => {
  const random = seeded(5);
  const setups = capacitors.map((c) => ({
    coil: "test coil",
    capacitor_F: { value: c, tolerance: 0.005 },
    supply_V: 12,
    switchOnVoltage_V: 0.2,
    switchRating_V: 600,
    windingTemperature_C: 20,
    clampVoltage_V: 500,
    repetitionRate_Hz: 50,
  }));
  const readings = capacitors.map((c, k) => {
    const trace = runBench(
      { inductance_H: L, resistance_ohm: R, capacitance_F: c + SELF, supply_V: 12 },
      [[0.1e-3, 1.1e-3]],
      12_000,
      0.5e-6,
      20,
    );
    const channels = [
      scoped("switch-node", "V", trace.node_V, random, { bits: 12 }),
      scoped("coil-current", "A", trace.current_A, random, { bits: 12 }),
    ];
    return readCapture(captureOf(channels, 0.5e-6), setups[k]).reading;
  });
  const coil = coilFromCaptures(readings, setups);

  it("L and self-capacitance within their uncertainties, R of ring and ramp alike", () => {
    const { inductance_H, selfCapacitance_F, seriesResistance_ohm } = coil.addedCapacitor!;
    expect(Math.abs(inductance_H!.value / L - 1)).toBeLessThan(0.001);
    expect(Math.abs(selfCapacitance_F!.value - SELF)).toBeLessThan(2 * selfCapacitance_F!.u);
    expect(seriesResistance_ohm!.value / R).toBeCloseTo(1, 2);
    expect(coil.ramp!.resistance_ohm!.value / R).toBeCloseTo(1, 2);
  });

  it("the dwell table is the closed form −(L/R)·ln(1 − I·R/V) of its own L and R", () => {
    const { dwell, ramp } = coil;
    const at20 = dwell!.temperatures_C.indexOf(20);
    const at12 = dwell!.supplies_V.indexOf(12);
    const [l, r] = [ramp!.inductance_H!.value, ramp!.resistance20_ohm!.value];
    expect(dwell!.time_s[at12][at20]!.value).toBeCloseTo(
      (-l / r) * Math.log(1 - (dwell!.current_A * r) / 11.8),
      9,
    );
    expect(dwell!.time_s[0][0]!.value).toBeLessThan(dwell!.time_s[0].at(-1)!.value);
  });

  it("stresses: stored energy ½LI², clamp energy and power, shares of ratings", () => {
    const of = (part: string, quantity: string) =>
      coil.stress.find((row) => row.part === part && row.quantity === quantity)!;
    const i = coil.drive.current_A!.value;
    expect(of("coil", "stored energy").value!.value).toBeCloseTo(
      0.5 * coil.drive.inductance_H!.value * i * i,
      9,
    );
    expect(of("clamp", "mean power").value!.value).toBeCloseTo(
      50 * of("clamp", "energy a pulse").value!.value,
      9,
    );
    expect(of("switch", "peak voltage").share).toBeCloseTo(
      of("switch", "peak voltage").value!.value / 600,
      9,
    );
    expect(of("coil", "secondary peak voltage")).toMatchObject({
      value: null,
      reason: expect.stringContaining("turns ratio"),
    });
  });
});

describe("dwell", () => {
  const winding = {
    inductance_H: { value: L, u: 1e-5 },
    resistance20_ohm: { value: 4, u: 0.01 },
    external_ohm: 0,
    on_V: 0,
    curve: null,
  };

  it("99 % of V/R after 4.6 L/R (exactly ln 100)", () => {
    expect(timeToCurrent(winding, 0.99 * 3, 12, 20)!.value).toBeCloseTo((L / 4) * Math.log(100), 9);
  });

  it("time to a stored energy: at the current that holds it", () => {
    const current = currentForEnergy_A(30e-3, L);
    expect(0.5 * L * current ** 2).toBeCloseTo(30e-3, 12);
    expect(timeToCurrent(winding, current, 24, 20)!.value).toBeCloseTo(
      (-L / 4) * Math.log(1 - (current * 4) / 24),
      9,
    );
  });

  it("a current the supply never drives is null, not infinite", () => {
    expect(dwellTable(winding, 3.01, [12], [20]).time_s).toEqual([[null]]);
  });

  it("a falling inductance needs less time than a constant one", () => {
    const curve = { current_A: [0, 1, 2], inductance_H: [L, L, 0.5 * L] };
    const saturating = timeToCurrent({ ...winding, curve }, 2, 12, 20)!.value;
    expect(saturating).toBeLessThan(timeToCurrent(winding, 2, 12, 20)!.value);
    expect(saturating).toBeGreaterThan(0.7 * timeToCurrent(winding, 2, 12, 20)!.value);
  });
});
