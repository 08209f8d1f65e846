/**
 * The bench as an independent circuit simulation (eecircuit-engine): a coil switched to ground, its
 * capacitor, a coupled secondary and a gap that breaks down. The gap's own state is the truth that
 * verdicts are checked against.
 */
import { Simulation } from "eecircuit-engine";
import { netlist } from "./simulate-netlist.ts";

export interface BenchCircuit {
  supply_V: number;
  inductance_H: number;
  winding_ohm: number;
  /** Loss across the coil's capacitance, null for none. */
  parallelLoss_ohm: number | null;
  capacitor_F: number;
  capacitorAcross: "coil" | "switch";
  /** In series with the switch: lets the node swing below ground. Without it the switch's diode clamps there. */
  blockingDiode: boolean;
  switch: { onVoltage_V: number; on_ohm: number; clampVoltage_V: number | null };
  secondary: {
    inductance_H: number;
    winding_ohm: number;
    capacitance_F: number;
    coupling: number;
  } | null;
  /** Arc: a burn voltage and a small resistance, until the current falls below `hold_A`. */
  gap: { burn_V: number; arc_ohm: number; hold_A: number } | null;
}

/** One conduction of the switch. */
export interface Drive {
  on_s: number;
  off_s: number;
  /** What the gap stands after this switch-off, null: it holds. */
  breakdown_V: number | null;
  /** The gap waits this long after switch-off for its first electron, whatever the voltage (0 when absent). */
  lag_s?: number;
}

export interface Strike {
  onset_s: number;
  extinction_s: number | null;
  /** Secondary voltage at which the gap gave way, sign included. */
  breakdown_V: number;
}

/** One value a step on an even grid from t = 0. Secondary arrays are zero where there is no secondary. */
export interface BenchWaveforms {
  step_s: number;
  node_V: Float64Array;
  coilCurrent_A: Float64Array;
  gate_V: Float64Array;
  secondary_V: Float64Array;
  gapCurrent_A: Float64Array;
  strikes: Strike[];
}

/** The simulator's internal grid follows the events; `step_s` is the even grid of the answer. */
export async function simulateBench(
  circuit: BenchCircuit,
  drives: Drive[],
  grid: { end_s: number; step_s: number; maxStep_s?: number },
): Promise<BenchWaveforms> {
  const maxStep_s = grid.maxStep_s ?? Math.min(grid.step_s, 1e-6);
  const vectors = await runNetlist(netlist(circuit, drives, grid.end_s, maxStep_s));
  const time = vectors.get("time")!;
  const samples = Math.floor(grid.end_s / grid.step_s) + 1;
  const even = (name: string) => resample(time, vectors.get(name), grid.step_s, samples);
  return {
    step_s: grid.step_s,
    node_V: even("v(node)"),
    coilCurrent_A: even("i(l1)"),
    gate_V: even("v(gate)"),
    secondary_V: even("v(hv)"),
    gapCurrent_A: even("i(vm)"),
    strikes: strikesOf(time, vectors.get("i(vm)"), vectors.get("v(hv)")),
  };
}

let engine: Promise<Simulation> | null = null;

/** Runs any netlist; the first line is its title. Vectors by lower-case name; throws with the simulator's words. */
export async function runNetlist(text: string): Promise<Map<string, number[]>> {
  engine ??= start();
  const simulation = await engine;
  simulation.setNetList(text);
  const result = await simulation.runSim();
  // A bad netlist hands back the previous run's data: the error list is the only sign.
  const errors = simulation.getError();
  if (errors.length > 0) throw new Error(`circuit simulator: ${errors.join(" | ")}`);
  if (result.dataType !== "real") throw new Error("circuit simulator: expected a time-domain result");
  return new Map(result.data.map((vector) => [vector.name.toLowerCase(), vector.values]));
}

async function start(): Promise<Simulation> {
  const simulation = new Simulation();
  await simulation.start();
  return simulation;
}

function resample(
  time: number[],
  values: number[] | undefined,
  step_s: number,
  samples: number,
): Float64Array {
  const out = new Float64Array(samples);
  if (!values) return out;
  let right = 1;
  for (let i = 0; i < samples; i++) {
    const t = i * step_s;
    while (right < time.length - 1 && time[right] < t) right++;
    const span = time[right] - time[right - 1];
    const share = span > 0 ? Math.min(1, Math.max(0, (t - time[right - 1]) / span)) : 1;
    out[i] = values[right - 1] + share * (values[right] - values[right - 1]);
  }
  return out;
}

/** The gap conducts where its current is far above leakage; a burning arc carries milliamperes. */
function strikesOf(time: number[], current: number[] | undefined, voltage: number[] | undefined): Strike[] {
  const strikes: Strike[] = [];
  if (!current || !voltage) return strikes;
  let burning = false;
  for (let i = 1; i < time.length; i++) {
    const conducts = Math.abs(current[i]) > 1e-5;
    if (conducts && !burning)
      strikes.push({ onset_s: time[i], extinction_s: null, breakdown_V: voltage[i - 1] });
    if (!conducts && burning) strikes[strikes.length - 1].extinction_s = time[i];
    burning = conducts;
  }
  return strikes;
}
