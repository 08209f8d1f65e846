/**
 * `npm run samples`: makes the demo run anew. Everything in it is invented: a pottery's kiln burner is
 * lit by a spark from a coil, the coil stands on the bench, a transistor with a series diode hits it
 * from 12 V, the gap is a pair of points 7 mm apart that needs dusting. Circuit by the independent
 * simulator, scope by test/reference/simulate-scope.ts.
 */
import { mkdirSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { seeded, type Random } from "../test/reference/random.ts";
import { simulateBench, type BenchCircuit, type BenchWaveforms } from "../test/reference/simulate.ts";
import { digitise } from "../test/reference/simulate-scope.ts";
import { scenario, type Shot } from "./scenario.ts";
import type { Column } from "./shapes.ts";

const folder = join(import.meta.dirname, "bench-run");

export const circuit: BenchCircuit = {
  supply_V: 12,
  inductance_H: 7.5e-3,
  winding_ohm: 0.8,
  parallelLoss_ohm: 3000,
  capacitor_F: 0.33e-6,
  capacitorAcross: "switch",
  blockingDiode: true,
  switch: { onVoltage_V: 0.2, on_ohm: 0.05, clampVoltage_V: null },
  secondary: { inductance_H: 48, winding_ohm: 8000, capacitance_F: 40e-12, coupling: 0.96 },
  gap: { burn_V: 600, arc_ohm: 500, hold_A: 5e-3 },
};

const setup = {
  format: "ringbook.setup/1",
  run: "Kiln burner, igniter coil on the bench",
  coil: "Igniter coil A",
  taken: "2026-10-17",
  expected: "spark",
  capacitor_F: { value: 3.3e-7, tolerance: 0.05 },
  capacitorAcross: "switch",
  strayCapacitance_F: { value: 2e-10, tolerance: 0.5 },
  turnsRatio: 80,
  secondaryCapacitance_F: 4e-11,
  coupling: 0.96,
  supply_V: 12,
  switchOnVoltage_V: 1,
  externalResistance_ohm: 0.05,
  windingTemperature_C: 21,
  switchRating_V: 300,
  gap: { distance_m: 0.007, electrodes: "points" },
  airTemperature_C: 19,
  airPressure_Pa: 98_500,
  channels: [{ name: "HV divider", role: "secondary", unit: "V", scale: 1000 }],
};

const channels: Record<
  Shot["channels"][number],
  (waves: BenchWaveforms, shot: Shot, random: Random) => Column
> = {
  node: (waves, shot, random) => {
    const screen = shot.nodeScreen_V ?? 600;
    const input = { screen, centre: shot.nodeCentre_V ?? 50, noise: screen / 500 };
    return column("Switch node", "V", 2, digitise(waves.node_V, waves.step_s, input, random));
  },
  current: (waves, _shot, random) =>
    column(
      "Coil current",
      "A",
      4,
      digitise(waves.coilCurrent_A, waves.step_s, { screen: 8, centre: 0, noise: 0.012 }, random),
    ),
  secondary: (waves, _shot, random) => {
    const divided = waves.secondary_V.map((value) => value / 1000);
    return column(
      "HV divider",
      "V",
      3,
      digitise(divided, waves.step_s, { screen: 60, centre: 0, noise: 0.1 }, random),
    );
  },
};

function column(name: string, unit: string, digits: number, samples: Float64Array): Column {
  return { name, unit, digits, samples };
}

rmSync(folder, { recursive: true, force: true });
mkdirSync(folder, { recursive: true });
const truth: Record<string, unknown> = {};
for (const shot of scenario) {
  const random = seeded(shot.seed);
  const waves = await simulateBench(circuit, shot.drives, { end_s: shot.end_s, step_s: shot.step_s });
  const columns = shot.channels.map((name) => channels[name](waves, shot, random));
  writeFileSync(
    join(folder, shot.file),
    shot.shape({ start_s: -shot.trigger_s, step_s: shot.step_s, columns }),
  );
  truth[shot.file] = {
    clockStart_s: -shot.trigger_s,
    pulses: shot.drives.map((drive) => pulseTruth(drive, waves, shot)),
  };
  console.log(`${shot.file}: ${shot.drives.length} pulses, ${waves.strikes.length} strikes`);
}
writeFileSync(join(folder, "setup.json"), `${JSON.stringify(setup, null, 2)}\n`);
writeFileSync(
  join(import.meta.dirname, "truth.json"),
  `${JSON.stringify({ note: "Invented demo data: what the simulated gap really did, times on each file's own axis.", circuit, files: truth }, null, 1)}\n`,
);
process.exit(0);

function pulseTruth(drive: Shot["drives"][number], waves: BenchWaveforms, shot: Shot) {
  const next = shot.drives.find(({ on_s }) => on_s > drive.off_s)?.on_s ?? Number.POSITIVE_INFINITY;
  const onAxis = (time_s: number) => Number((time_s - shot.trigger_s).toFixed(9));
  const strikes = waves.strikes
    .filter(({ onset_s }) => onset_s >= drive.off_s && onset_s < next)
    .map(({ onset_s, extinction_s, breakdown_V }) => ({
      onset_s: onAxis(onset_s),
      extinction_s: extinction_s === null ? null : onAxis(extinction_s),
      breakdown_V: Math.round(breakdown_V),
    }));
  return { switchOff_s: onAxis(drive.off_s), spark: strikes.length > 0, strikes };
}
