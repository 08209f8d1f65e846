/** The ramps of a capture's pulses as one. */
import { weightedMean } from "../coil/combine.ts";
import type { Figure, PulseReading, RampReading } from "../reading-format.ts";

const keys = [
  "inductance_H",
  "resistance_ohm",
  "initialCurrent_A",
  "finalCurrent_A",
  "saturationCurrent_A",
  "timeConstant_s",
  "energy_J",
  "resistance20_ohm",
] as const;

/** Null where no pulse has a ramp. */
export function combineRamps(pulses: PulseReading[]): RampReading | null {
  const ramps = pulses.flatMap((pulse) => (pulse.ramp ? [pulse.ramp] : []));
  if (ramps.length === 0) return null;
  const mean = (key: (typeof keys)[number]): Figure =>
    weightedMean(ramps.flatMap((ramp) => (ramp[key] ? [{ figure: ramp[key], common: 0 }] : [])));
  const reason = ramps.every((ramp) => ramp.reason !== null) ? ramps[0].reason : null;
  return {
    ...(Object.fromEntries(keys.map((key) => [key, mean(key)])) as Record<(typeof keys)[number], Figure>),
    curve: ramps.find((ramp) => ramp.curve)?.curve ?? null,
    reason,
  };
}
