/**
 * From the ring to L, C and R. With ω0² = ω_d² + α²: L = 1/(C·ω0²) for a stated capacitance,
 * C = 1/(L·ω0²) for a stated inductance, R = 2·α·L the equivalent series resistance. A secondary stated
 * in the setup is part of C.
 */
import type { BudgetLine, Figure } from "../reading-format.ts";
import { propagate, type Input } from "../numeric/propagate.ts";
import { standard } from "../setup/toleranced.ts";
import type { Setup, Toleranced } from "../setup/schema.ts";
import { effectiveCapacitance_F } from "./secondary.ts";

export interface Tank {
  inductance_H: Figure;
  capacitance_F: Figure;
  resistance_ohm: Figure;
  budget: Record<string, BudgetLine[]>;
}

/** Frequency and decay of the mode with their covariance, and the interval's relative uncertainty. */
export interface RingInput {
  frequency_Hz: number;
  decay_per_s: number;
  /** Variance of frequency, covariance, variance of decay. */
  covariance: [number, number, number];
  timeRelative: number;
}

const none: Tank = { inductance_H: null, capacitance_F: null, resistance_ohm: null, budget: {} };

/** `series_ohm`: the winding's resistance where the ramp gives it; tells series from parallel loss. */
export function inferTank(ring: RingInput, setup: Setup, series_ohm: Figure = null): Tank {
  if (setup.capacitor_F) return fromCapacitor(ring, setup, setup.capacitor_F, series_ohm);
  if (setup.knownInductance_H) return fromInductance(ring, setup.knownInductance_H);
  return none;
}

/** Inputs 0 … 2 of both: frequency, decay, and the interval as a factor on both. */
function ringInputs({ frequency_Hz, decay_per_s, covariance, timeRelative }: RingInput): Input[] {
  return [
    { source: "ring fit", value: frequency_Hz, u: Math.sqrt(covariance[0]), distribution: "normal" },
    { source: "ring fit", value: decay_per_s, u: Math.sqrt(covariance[2]), distribution: "normal" },
    { source: "sample interval", value: 1, u: timeRelative, distribution: "normal" },
  ];
}

function correlationOf({ covariance: [ff, fa, aa] }: RingInput): (a: number, b: number) => number {
  const r = ff > 0 && aa > 0 ? fa / Math.sqrt(ff * aa) : 0;
  return (a, b) => (a + b === 1 ? r : 0);
}

const toleranceInput = (source: string, stated: Toleranced | null | undefined): Input => ({
  source,
  value: standard(stated)?.value ?? 0,
  u: standard(stated)?.u ?? 0,
  distribution: typeof stated === "object" && stated?.k ? "normal" : "rectangular",
});

const naturalSquare = (f: number, a: number, interval: number) =>
  ((2 * Math.PI * f) ** 2 + a * a) / (interval * interval);

function fromCapacitor(ring: RingInput, setup: Setup, capacitor: Toleranced, series: Figure): Tank {
  const inputs = [
    ...ringInputs(ring),
    toleranceInput("capacitor tolerance", capacitor),
    toleranceInput("stray capacitance", setup.strayCapacitance_F),
    { source: "ramp resistance", value: 0, u: 0, distribution: "normal" as const },
  ];
  const total = ([f, a, interval, c, stray]: number[]) =>
    effectiveCapacitance_F(c + stray, naturalSquare(f, a, interval), setup);
  const plain = (x: number[]) => 1 / (total(x) * naturalSquare(x[0], x[1], x[2]));
  if (
    series &&
    2 * ring.decay_per_s > (series.value + 2 * series.u) / plain(inputs.map(({ value }) => value))
  )
    inputs[inputs.length - 1] = { source: "ramp resistance", ...series, distribution: "normal" };
  // ω0² = (1 + Rs/Rp)/(L·C) with 1/Rp = (2α − Rs/L)·C: at most 1/(4Q²) (methods.md 1).
  const inductance = (x: number[]) => {
    const [, decay, , , , rs] = x;
    const lossless = plain(x);
    let l = lossless;
    for (let round = 0; round < 3; round++) l = lossless * (1 + rs * total(x) * (2 * decay - rs / l));
    return l;
  };
  return tankOf(ring, inputs, inductance, total);
}

function fromInductance(ring: RingInput, stated: Toleranced): Tank {
  const inputs = [...ringInputs(ring), toleranceInput("stated inductance", stated)];
  const capacitance = ([f, a, interval, l]: number[]) => 1 / (l * naturalSquare(f, a, interval));
  return tankOf(ring, inputs, (x) => x[3], capacitance);
}

function tankOf(
  ring: RingInput,
  inputs: Input[],
  inductance: (x: number[]) => number,
  capacitance: (x: number[]) => number,
): Tank {
  const correlation = correlationOf(ring);
  const tank: Tank = { ...none, budget: {} };
  const set = (key: "inductance_H" | "capacitance_F" | "resistance_ohm", f: (x: number[]) => number) => {
    const { value, u, budget } = propagate(f, inputs, correlation);
    tank[key] = { value, u };
    tank.budget[key] = budget.filter((line) => line.u > 0);
  };
  set("inductance_H", inductance);
  set("capacitance_F", capacitance);
  set("resistance_ohm", (x) => (2 * x[1] * inductance(x)) / x[2]);
  return tank;
}
