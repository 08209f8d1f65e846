/** A run in which the capacitor is changed: each capture's ring is its own, and none of them a spark. */
import { expect, it } from "vitest";
import { readCapture } from "../../analysis/reading.ts";
import { judgeRun } from "../../analysis/run.ts";
import { captureOf, scoped } from "../reference/captures.ts";
import { integrateRing } from "../reference/coupled-ring.ts";
import { seeded } from "../reference/random.ts";

const STEP = 1e-6;
const CONDUCTION = 400;

/** Quiet by construction: the simulated secondary has no gap. */
function quietCapture(capacitance_F: number, random: ReturnType<typeof seeded>) {
  const circuit = {
    supply_V: 14,
    inductance_H: 4e-3,
    capacitance_F,
    winding_ohm: 0.6,
    parallelLoss_ohm: 2500,
    secondary: { inductance_H: 26, capacitance_F: 20e-12, coupling: 0.96, winding_ohm: 4000 },
  };
  const ring = integrateRing(circuit, { current_A: 3, node_V: 0.4 }, null, { samples: 3000, step_s: STEP });
  const node = new Float64Array(CONDUCTION + 3000).fill(0.4);
  node.set(ring.node_V, CONDUCTION);
  const channel = scoped("switch-node", "V", node, random, { bits: 10, noise_lsb: 0.8 });
  return captureOf([channel], STEP, -CONDUCTION * STEP);
}

it.each([
  [[100e-9, 150e-9, 220e-9, 330e-9, 470e-9]],
  [[100e-9, 100e-9, 100e-9, 220e-9, 470e-9]],
  [[100e-9, 100e-9, 470e-9, 470e-9]],
])("calls no spark with capacitors %j", (capacitors) => {
  const random = seeded(5);
  const evidence = capacitors.map((capacitance_F) =>
    readCapture(quietCapture(capacitance_F, random), { supply_V: 14, expected: "no-spark" }),
  );
  const verdicts = judgeRun(evidence, {}).readings.flatMap(({ pulses }) =>
    pulses.map(({ spark }) => spark!.verdict),
  );
  expect(verdicts).toEqual(capacitors.map(() => "no-spark"));
});
