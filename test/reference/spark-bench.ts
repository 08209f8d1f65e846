/** Random benches for the simulated set: a coil, its tank and secondary, a scope that suits them. */
import { naturalFrequencies_Hz, type RingCircuit } from "./coupled-ring.ts";
import type { Random } from "./random.ts";
import type { ScopeInput } from "./simulate-scope.ts";

/** What makes a run hard; "plain" has none of it. */
export const troubles = [
  "plain",
  "beating",
  "next turn-on",
  "clamp",
  "burst",
  "hum",
  "clipped",
  "saturating",
  "hysteresis",
  "bounce",
  "ac-coupled",
  "compensation",
  "inverted",
  "coloured",
  "damped",
] as const;
export type Trouble = (typeof troubles)[number];

export interface RandomBench {
  trouble: Trouble;
  circuit: RingCircuit;
  current_A: number;
  onVoltage_V: number;
  /** Period of the low mode. */
  period_s: number;
  step_s: number;
  /** Samples from switch-off to the next switching edge or the record's end. */
  free: number;
  turnsRatio: number;
}

export function randomBench(trouble: Trouble, random: Random): RandomBench {
  const inductance_H = 10 ** random.between(-3, -1.7);
  const capacitance_F = 10 ** random.between(-7, -6);
  const turnsRatio = random.between(40, 120);
  const beats = trouble === "beating";
  const ratio = beats ? random.between(0.8, 1.25) : random.between(0.1, 1.2);
  const coupling = beats ? random.between(0.25, 0.6) : random.between(0.85, 0.98);
  const q = trouble === "damped" ? random.between(1.5, 4) : random.between(8, 40);
  const onePart = Math.sqrt(inductance_H / (capacitance_F * (1 + ratio)));
  const secondaryInductance_H = inductance_H * turnsRatio ** 2;
  const circuit: RingCircuit = {
    supply_V: random.between(10, 28),
    inductance_H,
    capacitance_F,
    winding_ohm: (onePart / q) * random.between(0.1, 0.4),
    parallelLoss_ohm: onePart * q * random.between(1.2, 2),
    secondary: {
      inductance_H: secondaryInductance_H,
      capacitance_F: (ratio * capacitance_F) / turnsRatio ** 2,
      coupling,
      winding_ohm: ((onePart * turnsRatio ** 2) / q) * random.between(0.2, 1),
    },
  };
  const current_A = random.between(1, 5);
  if (trouble === "saturating") circuit.saturation_A = current_A * random.between(1.2, 2.5);
  const period_s = 1 / naturalFrequencies_Hz(circuit)[0];
  const perPeriod = random.between(50, 200);
  const periods = trouble === "next turn-on" ? random.between(2.2, 5) : random.between(6, 20);
  return {
    trouble,
    circuit,
    current_A,
    onVoltage_V: random.between(0.1, 1.2),
    period_s,
    step_s: period_s / perPeriod,
    free: Math.round(perPeriod * periods),
    turnsRatio,
  };
}

/** Scope settings for a quiet kick of this size: screen, noise, and the trouble the scope makes. */
export function randomScope(bench: RandomBench, kick_V: number, random: Random): ScopeInput {
  const { trouble, period_s } = bench;
  const room = trouble === "clipped" ? random.between(1.2, 1.7) : random.between(2.3, 4);
  const screen = kick_V * room;
  const input: ScopeInput = {
    screen,
    centre: trouble === "ac-coupled" ? 0 : bench.circuit.supply_V,
    noise: (screen / 256) * random.between(0.4, 1.5),
  };
  if (trouble === "inverted") Object.assign(input, { inverted: true, centre: -bench.circuit.supply_V });
  if (trouble === "ac-coupled") input.acCoupling_s = period_s * random.between(4, 40);
  if (trouble === "coloured") input.colour = random.between(0.6, 0.93);
  if (trouble === "compensation")
    input.compensation = {
      error: random.pick([-1, 1]) * random.between(0.05, 0.25),
      settles_s: period_s * random.between(0.05, 1),
    };
  if (trouble === "hum")
    input.hum = {
      amplitude: kick_V * random.between(0.01, 0.06),
      frequency_Hz: 1 / (period_s * random.between(15, 60)),
      phase_rad: 0,
    };
  return input;
}
