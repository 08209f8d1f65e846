/**
 * What the user states about the bench (`ringbook.setup/1`), SI units, everything optional.
 * The bounds refuse absurd sizes (a farad on an ignition coil), not unusual ones.
 */
import * as v from "valibot";
import { channelRoles } from "../capture.ts";

const between = (low: number, high: number) =>
  v.pipe(
    v.number("must be a number"),
    v.finite("must be a finite number"),
    v.minValue(low, `must be at least ${low}`),
    v.maxValue(high, `must be at most ${high}`),
  );

const maybe = <T extends v.GenericSchema>(schema: T) => v.optional(v.nullable(schema));

/** A number, or {value, tolerance}: a relative half-width, or an expanded uncertainty if k is given. */
const toleranced = (low: number, high: number) =>
  v.union(
    [
      between(low, high),
      v.strictObject({
        value: between(low, high),
        tolerance: maybe(between(0, 1)),
        k: maybe(between(1, 5)),
      }),
    ],
    `must be a number from ${low} to ${high}, or {"value": …, "tolerance": …} with a relative tolerance from 0 to 1`,
  );

const text = v.pipe(v.string("must be text"), v.maxLength(2000, "is too long"));

const gap = v.strictObject({
  distance_m: maybe(between(1e-6, 10)),
  electrodes: maybe(v.picklist(["points", "spheres"], 'must be "points" or "spheres"')),
  diameter_m: maybe(between(1e-5, 10)),
});

const channel = v.strictObject({
  position: maybe(v.pipe(between(0, 100_000), v.integer("must be a whole number"))),
  name: maybe(text),
  file: maybe(text),
  role: maybe(v.picklist(channelRoles, `must be one of ${channelRoles.join(", ")}`)),
  unit: maybe(text),
  scale: maybe(between(-1e9, 1e9)),
  offset: maybe(between(-1e9, 1e9)),
});

export const setupSchema = v.strictObject({
  format: v.optional(v.literal("ringbook.setup/1", 'must be "ringbook.setup/1"')),
  run: maybe(text),
  coil: maybe(text),
  taken: maybe(text),
  expected: maybe(v.picklist(["spark", "no-spark"], 'must be "spark", "no-spark" or null')),
  capacitor_F: maybe(toleranced(1e-13, 0.1)),
  capacitorAcross: maybe(v.picklist(["coil", "switch"], 'must be "coil" or "switch"')),
  strayCapacitance_F: maybe(toleranced(0, 1e-3)),
  knownInductance_H: maybe(toleranced(1e-10, 1e4)),
  turnsRatio: maybe(between(1e-4, 1e5)),
  secondaryInductance_H: maybe(between(1e-10, 1e6)),
  secondaryCapacitance_F: maybe(between(0, 1e-3)),
  coupling: maybe(between(0, 1)),
  supply_V: maybe(between(-1e5, 1e5)),
  switchOnVoltage_V: maybe(between(-100, 100)),
  externalResistance_ohm: maybe(between(0, 1e6)),
  windingTemperature_C: maybe(between(-100, 400)),
  repetitionRate_Hz: maybe(between(0, 1e7)),
  switchRating_V: maybe(between(0.1, 1e6)),
  clampVoltage_V: maybe(between(0.1, 1e6)),
  clampPower_W: maybe(between(0, 1e6)),
  capacitorRating_V: maybe(between(0.1, 1e6)),
  capacitorPeakCurrent_A: maybe(between(0, 1e6)),
  capacitorDvdt_V_per_s: maybe(between(0, 1e15)),
  probeRating_V: maybe(between(0.1, 1e6)),
  coilRating_V: maybe(between(0.1, 1e7)),
  gap: maybe(gap),
  airTemperature_C: maybe(between(-100, 100)),
  airPressure_Pa: maybe(between(1, 1e7)),
  sampleInterval_s: maybe(between(1e-15, 1e4)),
  timeUnit: maybe(v.picklist(["s", "ms", "us", "ns", "ps"], "must be s, ms, us, ns or ps")),
  decimalMark: maybe(v.picklist([".", ","], 'must be "." or ","')),
  wide: maybe(v.picklist(["channels", "shots"], 'must be "channels" or "shots"')),
  channels: maybe(v.array(channel, "must be a list")),
});

export type Setup = v.InferOutput<typeof setupSchema>;
export type SetupChannel = NonNullable<Setup["channels"]>[number];
export type Toleranced = NonNullable<Setup["capacitor_F"]>;
