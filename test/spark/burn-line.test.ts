/** Strays for a capacitor, a clamped switch, an arc that burns most of the energy away: little ring is left after it. */
import { beforeAll, describe, expect, it } from "vitest";
import type { CaptureEvidence } from "../../analysis/evidence.ts";
import { ingestBytes } from "../../analysis/ingest/index.ts";
import { readCapture } from "../../analysis/reading.ts";
import { judgeRun } from "../../analysis/run.ts";
import { seeded } from "../reference/random.ts";
import { digitise } from "../reference/simulate-scope.ts";
import { simulateBench, type BenchCircuit, type Strike } from "../reference/simulate.ts";

const circuit: BenchCircuit = {
  supply_V: 14,
  inductance_H: 4e-3,
  winding_ohm: 0.6,
  parallelLoss_ohm: 900,
  capacitor_F: 3e-9,
  capacitorAcross: "switch",
  blockingDiode: false,
  switch: { onVoltage_V: 1.2, on_ohm: 0.05, clampVoltage_V: 390 },
  secondary: { inductance_H: 40, winding_ohm: 8000, capacitance_F: 60e-12, coupling: 0.98 },
  gap: { burn_V: 800, arc_ohm: 10_000, hold_A: 4e-3 },
};
const setup = { supply_V: 14, turnsRatio: 100 };
const off_s = 1.9e-3;

interface Shot {
  evidence: CaptureEvidence;
  strikes: Strike[];
}

async function shoot(breakdown_V: number | null, seed: number, secondary: boolean): Promise<Shot> {
  const random = seeded(seed);
  const drive = { on_s: 3e-4, off_s, breakdown_V };
  const waves = await simulateBench(circuit, [drive], { end_s: 6e-3, step_s: 1e-6, maxStep_s: 2e-7 });
  const node = digitise(waves.node_V, 1e-6, { screen: 500, centre: 190, noise: 1 }, random);
  const high = digitise(waves.secondary_V, 1e-6, { screen: 8e4, centre: 0, noise: 100 }, random);
  const rows = Array.from(node, (volts, i) =>
    [(i * 1e-6).toFixed(6), volts.toFixed(2), ...(secondary ? [high[i].toFixed(0)] : [])].join(","),
  );
  const names = ["Time (s)", "Switch node (V)", ...(secondary ? ["Secondary (V)"] : [])].join(",");
  const [capture] = ingestBytes(new TextEncoder().encode([names, ...rows].join("\n")), setup);
  return { evidence: readCapture(capture, setup), strikes: waves.strikes };
}

const judgedAlone = ({ evidence }: Shot) => judgeRun([evidence], setup).readings[0].pulses;

describe("a burn line, by the circuit simulator", () => {
  let sparking: Shot[];
  let quiet: Shot;
  let measured: Shot;
  beforeAll(async () => {
    sparking = [await shoot(14_000, 1, false), await shoot(20_000, 2, false)];
    quiet = await shoot(null, 3, false);
    measured = await shoot(16_000, 4, true);
  }, 120_000);

  it("is one switch-off, where the switch opened, and a spark, though the pulse is alone", () => {
    for (const shot of sparking) {
      expect(shot.strikes.length).toBeGreaterThan(0);
      const pulses = judgedAlone(shot);
      expect(pulses).toHaveLength(1);
      expect(Math.abs(pulses[0].switchOffTime_s! - off_s)).toBeLessThan(2e-6);
      expect(pulses[0].spark).toMatchObject({ verdict: "spark" });
    }
  });

  it("is told from a clamp that holds and a diode that cuts: those are never called a spark", () => {
    expect(quiet.strikes).toEqual([]);
    const pulses = judgedAlone(quiet);
    expect(pulses).toHaveLength(1);
    expect(pulses[0].spark?.verdict).not.toBe("spark");
  });

  it("is decided by the secondary's own collapse where that is on a channel", () => {
    const [{ spark }] = judgedAlone(measured);
    const [strike] = measured.strikes;
    expect(spark).toMatchObject({ verdict: "spark", breakdownFrom: "secondary" });
    expect(Math.abs(Math.abs(spark!.breakdown_V! / strike.breakdown_V) - 1)).toBeLessThan(0.05);
    expect(Math.abs(spark!.onset_s! - strike.onset_s)).toBeLessThan(3e-6);
  });
});
