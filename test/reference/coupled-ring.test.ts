import { describe, expect, it } from "vitest";
import { integrateRing, naturalFrequencies_Hz } from "./coupled-ring.ts";
import { simulateBench, type BenchCircuit } from "./simulate.ts";

const bench: BenchCircuit = {
  supply_V: 12,
  inductance_H: 7.5e-3,
  winding_ohm: 0.8,
  parallelLoss_ohm: 3000,
  capacitor_F: 0.33e-6,
  capacitorAcross: "switch",
  blockingDiode: true,
  switch: { onVoltage_V: 0.2, on_ohm: 0.05, clampVoltage_V: null },
  secondary: { inductance_H: 48, winding_ohm: 8000, capacitance_F: 40e-12, coupling: 0.96 },
  gap: { burn_V: 600, arc_ohm: 500, hold_A: 1e-3 },
};

/** Root mean square difference against the circuit simulator's kick, over 2 ms from switch-off. */
async function compare(breakdown_V: number | null, lag_s = 0, until_s = 2e-3) {
  const off_s = 1.6e-3;
  const step_s = 1e-6;
  const drives = [{ on_s: 1e-4, off_s, breakdown_V, lag_s }];
  const truth = await simulateBench(bench, drives, { end_s: 4e-3, step_s, maxStep_s: 2e-7 });
  const first = 1601;
  const start = {
    current_A: truth.coilCurrent_A[first],
    node_V: truth.node_V[first],
    secondary_V: truth.secondary_V[first],
    secondaryCurrent_A:
      (40e-12 * (truth.secondary_V[first + 1] - truth.secondary_V[first - 1])) / (2 * step_s),
  };
  const gap = breakdown_V === null ? null : { breakdown_V, lag_s, kind: { burn_V: 600 }, hold: 1e-3 };
  const circuit = {
    ...bench,
    capacitance_F: bench.capacitor_F,
    parallelLoss_ohm: 3000,
    secondary: bench.secondary!,
  };
  const fast = integrateRing(circuit, start, gap, { samples: 2000, step_s });
  const samples = Math.round(until_s / step_s);
  let sum = 0;
  for (let i = 0; i < samples; i++) sum += (fast.node_V[i] - truth.node_V[first + i]) ** 2;
  return { rms: Math.sqrt(sum / samples) / Math.max(...truth.node_V), fast, truth };
}

describe("fast integrator against the circuit simulator", () => {
  it("a quiet pulse agrees within 0.5 % of the kick", async () => {
    // What is left is the secondary's small turn-on ringing, which the integrator starts without.
    expect((await compare(null)).rms).toBeLessThan(0.005);
  });

  it("a spark at the first rise: onset, extinction and the node through the first arc", async () => {
    // Only through the first arc: whether a later half-wave strikes again hangs on the last volt.
    const { rms, fast, truth } = await compare(12_000, 0, 95e-6);
    expect(Math.abs(fast.strikes[0].onset_s - (truth.strikes[0].onset_s - 1.6e-3))).toBeLessThan(2e-6);
    expect(Math.abs(fast.strikes[0].extinction_s! - (truth.strikes[0].extinction_s! - 1.6e-3))).toBeLessThan(
      4e-6,
    );
    expect(rms).toBeLessThan(0.02);
  });

  it("natural frequencies are those of the simulated quiet ring: zero crossings of the low mode", async () => {
    const { fast } = await compare(null);
    const [low] = naturalFrequencies_Hz({
      ...bench,
      capacitance_F: 0.33e-6,
      parallelLoss_ohm: 3000,
      secondary: bench.secondary!,
    });
    let crossings = 0;
    for (let i = 1; i < 2000; i++)
      if (fast.coilCurrent_A[i - 1] > 0 !== fast.coilCurrent_A[i] > 0) crossings++;
    expect(crossings).toBeGreaterThanOrEqual(Math.floor(low * 2e-3 * 2) - 1);
  });
});
