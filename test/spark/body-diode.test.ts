import { beforeAll, describe, expect, it } from "vitest";
import type { CaptureEvidence } from "../../analysis/evidence.ts";
import { ingestBytes } from "../../analysis/ingest/index.ts";
import { readCapture } from "../../analysis/reading.ts";
import { judgeRun, type RunJudgement } from "../../analysis/run.ts";
import type { Setup } from "../../analysis/setup/schema.ts";
import { seeded } from "../reference/random.ts";
import { digitise } from "../reference/simulate-scope.ts";
import { simulateBench, type BenchCircuit } from "../reference/simulate.ts";

/** A bare switch: its body diode conducts in the negative half-waves, and no ring is free for long. */
const circuit: BenchCircuit = {
  supply_V: 12,
  inductance_H: 7.5e-3,
  winding_ohm: 0.8,
  parallelLoss_ohm: 3000,
  capacitor_F: 0.33e-6,
  capacitorAcross: "switch",
  blockingDiode: false,
  switch: { onVoltage_V: 0.2, on_ohm: 0.05, clampVoltage_V: null },
  secondary: { inductance_H: 48, winding_ohm: 8000, capacitance_F: 40e-12, coupling: 0.96 },
  gap: { burn_V: 600, arc_ohm: 500, hold_A: 5e-3 },
};

const setup: Setup = {
  capacitor_F: 3.3e-7,
  capacitorAcross: "switch",
  turnsRatio: 80,
  secondaryCapacitance_F: 4e-11,
  coupling: 0.96,
  supply_V: 12,
  expected: "spark",
};

/** Volts at which the gap breaks down; null: it holds. */
const gaps = [null, null, 8000, null, 12_000, 15_000];

describe("a run whose half-waves a body diode cuts, by the circuit simulator", () => {
  let evidence: CaptureEvidence[];
  let judged: RunJudgement;
  let truth: boolean[];

  beforeAll(async () => {
    const random = seeded(11);
    evidence = [];
    truth = [];
    for (const breakdown_V of gaps) {
      const drive = { on_s: 3e-4, off_s: 1.8e-3, breakdown_V };
      const waves = await simulateBench(circuit, [drive], { end_s: 6e-3, step_s: 1e-6, maxStep_s: 4e-7 });
      truth.push(waves.strikes.length > 0);
      const node = digitise(waves.node_V, waves.step_s, { screen: 500, centre: 150, noise: 1 }, random);
      const current = digitise(
        waves.coilCurrent_A,
        waves.step_s,
        { screen: 8, centre: 0, noise: 0.01 },
        random,
      );
      const rows = Array.from(
        node,
        (volts, i) => `${(i * 1e-6).toFixed(6)},${volts.toFixed(2)},${current[i].toFixed(4)}`,
      );
      const text = `Time (s),Switch node (V),Coil current (A)\n${rows.join("\n")}\n`;
      const [capture] = ingestBytes(new TextEncoder().encode(text), setup);
      evidence.push(readCapture(capture, setup));
    }
    judged = judgeRun(evidence, setup);
  }, 120_000);

  it("is judged by the half-waves' volt-seconds as the gap really behaved", () => {
    expect(truth).toEqual([false, false, true, false, true, true]);
    const verdicts = judged.readings.map(({ pulses }) => pulses.map(({ spark }) => spark?.verdict));
    expect(verdicts).toEqual(truth.map((sparked) => [sparked ? "spark" : "no-spark"]));
    expect(judged.readings[0].pulses[0].spark?.reasons[0]).toContain("volt-seconds");
  });

  it("tells a pulse that is alone by what L and the current allow", () => {
    for (const [i, sparked] of truth.entries()) {
      const [{ pulses }] = judgeRun([evidence[i]], setup).readings;
      expect(pulses[0].spark?.verdict, `pulse ${i}`).not.toBe(sparked ? "no-spark" : "spark");
    }
  });
});
