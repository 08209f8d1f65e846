/** Words and units of what is stated, the same on the card and in a report. */
import { formatStated } from "../format/figure.ts";
import type { Setup, Toleranced } from "./schema.ts";

export type FieldKey = Exclude<keyof Setup, "format" | "channels" | "gap">;

export const fieldWords: Record<FieldKey, { words: string; unit: string }> = {
  run: { words: "run", unit: "" },
  capacitor_F: { words: "capacitor", unit: "F" },
  strayCapacitance_F: { words: "stray capacitance", unit: "F" },
  knownInductance_H: { words: "inductance, if known", unit: "H" },
  turnsRatio: { words: "turns ratio", unit: "" },
  secondaryCapacitance_F: { words: "secondary capacitance", unit: "F" },
  secondaryInductance_H: { words: "secondary inductance", unit: "H" },
  coupling: { words: "coupling", unit: "" },
  supply_V: { words: "supply", unit: "V" },
  switchOnVoltage_V: { words: "switch when on", unit: "V" },
  externalResistance_ohm: { words: "resistance outside the coil", unit: "Ω" },
  windingTemperature_C: { words: "winding temperature", unit: "°C" },
  repetitionRate_Hz: { words: "repetition rate", unit: "Hz" },
  switchRating_V: { words: "switch rating", unit: "V" },
  probeRating_V: { words: "probe rating", unit: "V" },
  coilRating_V: { words: "coil’s rating", unit: "V" },
  capacitorRating_V: { words: "capacitor rating", unit: "V" },
  capacitorPeakCurrent_A: { words: "capacitor’s peak current", unit: "A" },
  capacitorDvdt_V_per_s: { words: "capacitor’s steepness", unit: "V/s" },
  clampVoltage_V: { words: "clamp voltage", unit: "V" },
  clampPower_W: { words: "clamp’s mean power", unit: "W" },
  airTemperature_C: { words: "air temperature", unit: "°C" },
  airPressure_Pa: { words: "air pressure", unit: "Pa" },
  sampleInterval_s: { words: "sample interval", unit: "s" },
  coil: { words: "coil", unit: "" },
  taken: { words: "taken on", unit: "" },
  expected: { words: "a spark is expected", unit: "" },
  capacitorAcross: { words: "capacitor sits across the", unit: "" },
  timeUnit: { words: "unit of the time column", unit: "" },
  decimalMark: { words: "decimal mark", unit: "" },
  wide: { words: "several columns are", unit: "" },
};

export const choiceWords: Partial<Record<FieldKey, Record<string, string>>> = {
  expected: { spark: "yes", "no-spark": "no" },
  capacitorAcross: { coil: "coil", switch: "switch" },
  timeUnit: { s: "s", ms: "ms", us: "µs", ns: "ns", ps: "ps" },
  decimalMark: { ".": "point", ",": "comma" },
  wide: { channels: "channels", shots: "shots" },
};

/** A statement in words, a line for each channel: [["capacitor", "330 nF ± 5 %"]]. Null states nothing. */
export function statementWords(key: keyof Setup, setup: Setup): [what: string, value: string][] {
  const value = setup[key];
  if (key === "format" || value === null || value === undefined) return [];
  if (key === "channels") return (setup.channels ?? []).map(channelWords);
  if (key === "gap") return [["gap", gapWords(setup.gap!)]];
  const { words, unit } = fieldWords[key];
  if (typeof value === "string") return [[words, choiceWords[key]?.[value] ?? value]];
  return [[words, tolerancedWords(value as Toleranced, unit)]];
}

function tolerancedWords(stated: Toleranced, unit: string): string {
  if (typeof stated === "number") return formatStated(stated, unit);
  const { value, tolerance, k } = stated;
  if (!tolerance) return formatStated(value, unit);
  const expanded = k ? ` (k = ${k})` : "";
  return `${formatStated(value, unit)} ± ${formatStated(tolerance * 100, "%")}${expanded}`;
}

function channelWords(channel: NonNullable<Setup["channels"]>[number]): [string, string] {
  const { position, name, file, role, unit, scale, offset } = channel;
  const what = [
    name ? `"${name}"` : (position ?? null) === null ? "" : `${position! + 1}`,
    file ? `in ${file}` : "",
  ];
  const value = [
    role?.replaceAll("-", " "),
    unit ? `in ${unit}` : null,
    (scale ?? null) === null ? null : `times ${scale}`,
    (offset ?? null) === null ? null : `plus ${offset}`,
  ];
  return [["channel", ...what].filter(Boolean).join(" "), value.filter(Boolean).join(", ")];
}

function gapWords({ distance_m, electrodes, diameter_m }: NonNullable<Setup["gap"]>): string {
  const parts = [
    (distance_m ?? null) === null ? null : formatStated(distance_m!, "m"),
    electrodes ? `between ${electrodes}` : null,
    (diameter_m ?? null) === null ? null : `diameter ${formatStated(diameter_m!, "m")}`,
  ];
  return parts.filter(Boolean).join(", ");
}
