import { describe, expect, it } from "vitest";
import { readCapture } from "../../analysis/reading.ts";
import { captureOf, channelOf } from "../reference/captures.ts";
import { eigenmodes } from "../reference/coupled-modes.ts";
import { coupledTrial, type CoupledTrial } from "../reference/coupled-set.ts";

const read = ({ trial, tanks }: CoupledTrial, stated: object = {}) => {
  const capture = captureOf([channelOf("switch-node", "V", trial.samples, trial.lsb)], trial.step_s);
  return readCapture(capture, { capacitor_F: tanks.c1_F, supply_V: 0, ...stated }).reading;
};

describe("coupled rings of the circuit simulator (eecircuit-engine) against the circuit's eigenvalues", () => {
  it("the eigenvalues are the closed form's where nothing is lost (methods.md 1)", () => {
    const tanks = {
      l1_H: 7.5e-3,
      r1_ohm: 0,
      c1_F: 330e-9,
      l2_H: 48,
      r2_ohm: 0,
      c2_F: 40e-12,
      coupling: 0.96,
    };
    const [a, b] = [1 / (tanks.l1_H * tanks.c1_F), 1 / (tanks.l2_H * tanks.c2_F)];
    const k2 = 1 - tanks.coupling ** 2;
    const root = Math.sqrt((a + b) ** 2 - 4 * k2 * a * b);
    const [low, high] = eigenmodes(tanks);
    expect((2 * Math.PI * low.frequency_Hz) ** 2 / ((a + b - root) / (2 * k2))).toBeCloseTo(1, 9);
    expect((2 * Math.PI * high.frequency_Hz) ** 2 / ((a + b + root) / (2 * k2))).toBeCloseTo(1, 9);
  });

  it.each([1, 2, 3, 4])(
    "circuit %i: both frequencies within 4.5 bounds, L right where C2 and k are stated",
    async (seed) => {
      const trial = await coupledTrial(seed);
      const { tanks, truth, bound_Hz } = trial;
      const stated = {
        turnsRatio: Math.sqrt(tanks.l2_H / tanks.l1_H),
        secondaryCapacitance_F: tanks.c2_F,
        coupling: tanks.coupling,
      };
      const [pulse] = read(trial, stated).pulses;
      expect(pulse.ring!.modes).toHaveLength(2);
      truth.forEach((mode, m) =>
        expect(Math.abs(pulse.ring!.modes[m].frequency_Hz.value - mode.frequency_Hz)).toBeLessThan(
          4.5 * bound_Hz[m],
        ),
      );
      expect(Math.abs(pulse.inductance_H!.value / tanks.l1_H - 1)).toBeLessThan(0.005);
      const unstated = read(trial, { turnsRatio: stated.turnsRatio });
      expect(unstated.notes.map((note) => note.code)).toContain("secondary-capacitance-unknown");
      expect(unstated.pulses[0].inductance_H!.value).toBeGreaterThan(1.1 * tanks.l1_H);
    },
  );
});
