import type { BenchCircuit, Drive } from "./simulate.ts";

/** Edge time of the gate: short against every ring of interest. */
const edge_s = 20e-9;

/** Netlist of the bench: nodes `node` (switch node), `hv` (secondary), `gate`; current `i(l1)` is the coil's. */
export function netlist(circuit: BenchCircuit, drives: Drive[], end_s: number, maxStep_s: number): string {
  const saved = ["v(node)", "i(l1)", "v(gate)"];
  if (circuit.secondary) saved.push("v(hv)");
  if (circuit.secondary && circuit.gap) saved.push("i(vm)");
  return [
    "switched coil",
    ...primary(circuit),
    ...switchLines(circuit),
    piecewise(
      "vg gate 0",
      drives.flatMap(({ on_s, off_s }) => [[on_s, 0, 5] as Step, [off_s, 5, 0] as Step]),
      0,
    ),
    ...(circuit.secondary ? secondary(circuit, drives, end_s) : []),
    ".options reltol=1e-4 abstol=1e-9",
    `.tran ${maxStep_s} ${end_s} 0 ${maxStep_s} uic`,
    `.save ${saved.join(" ")}`,
    ".end",
  ].join("\n");
}

function primary(circuit: BenchCircuit): string[] {
  const across = circuit.capacitorAcross === "coil" ? "sup" : "0";
  const start_V = circuit.capacitorAcross === "coil" ? 0 : circuit.supply_V;
  const lines = [
    `vs sup 0 ${circuit.supply_V}`,
    `rs sup winding ${circuit.winding_ohm}`,
    `l1 winding node ${circuit.inductance_H} ic=0`,
    `c1 node ${across} ${circuit.capacitor_F} ic=${start_V}`,
  ];
  if (circuit.parallelLoss_ohm !== null) lines.push(`rp sup node ${circuit.parallelLoss_ohm}`);
  return lines;
}

function switchLines({ switch: device, blockingDiode }: BenchCircuit): string[] {
  const drain = blockingDiode ? "drain" : "node";
  const lines = [
    `vsw ${drain} channel ${device.onVoltage_V}`,
    `ssw channel 0 gate 0 swmod`,
    `.model swmod sw(vt=2.5 vh=0.5 ron=${device.on_ohm} roff=1e9)`,
    `dbody 0 ${drain} body`,
    `.model body d(is=1e-12 n=1 rs=0.01 bv=1e6)`,
    `.model blocking d(is=1e-9 n=1.5 rs=0.02 bv=1e6)`,
  ];
  if (blockingDiode) lines.push("dblock node drain blocking");
  if (device.clampVoltage_V !== null)
    lines.push(`dclamp ${drain} clamped blocking`, `vclamp clamped 0 ${device.clampVoltage_V}`);
  return lines;
}

/**
 * The gap is a switch with hysteresis on its own control: closed once |v| reaches the breakdown
 * voltage, open again once the arc's current falls below the holding current.
 */
function secondary(circuit: BenchCircuit, drives: Drive[], end_s: number): string[] {
  const { inductance_H, winding_ohm, capacitance_F, coupling } = circuit.secondary!;
  const lines = [
    `l2 0 turns ${inductance_H} ic=0`,
    `k1 l1 l2 ${coupling}`,
    `r2 turns hv ${winding_ohm}`,
    `c2 hv 0 ${capacitance_F} ic=0`,
  ];
  if (!circuit.gap) return lines;
  const { burn_V, arc_ohm, hold_A } = circuit.gap;
  const holds_V = 1e9;
  const changes = drives.flatMap(({ off_s, breakdown_V, lag_s }, i) => {
    if (breakdown_V === null) return [];
    const next_s = drives[i + 1]?.on_s ?? end_s;
    return [
      [off_s + (lag_s ?? 0), holds_V, breakdown_V],
      [next_s, breakdown_V, holds_V],
    ] as Step[];
  });
  return [
    ...lines,
    piecewise("vbreak strength 0", changes, holds_V),
    `sgap hv arc state 0 gapmod`,
    `.model gapmod sw(vt=0.55 vh=0.45 ron=${arc_ohm} roff=1e13)`,
    `barc cathode 0 v=${burn_V}*tanh(i(vm)/${hold_A / 5})`,
    `vm arc cathode 0`,
    `bcontrol control 0 v=max(abs(v(hv))/v(strength), min(0.1*abs(i(vm))/${hold_A}, 0.9))`,
    `rcontrol control state 1k`,
    `ccontrol state 0 10p`,
  ];
}

type Step = [time_s: number, from: number, to: number];

function piecewise(head: string, steps: Step[], start: number): string {
  const points = steps.flatMap(([time_s, from, to]) => [`${time_s} ${from}`, `${time_s + edge_s} ${to}`]);
  // One point a continuation line: a long train's list would overrun the simulator's line.
  return [`${head} pwl(0 ${start}`, ...points.map((point) => `+ ${point}`), "+ )"].join("\n");
}
