/** Every field of the setup card: its words, its unit, what it is for, and what is usual. */
import type { Setup } from "../../analysis/setup/schema.ts";

export type FieldKey = Exclude<keyof Setup, "format" | "channels" | "gap">;

export interface Field {
  key: FieldKey;
  words: string;
  kind: "number" | "toleranced" | "choice" | "text";
  unit: string;
  help: string;
  /** Outside of it an entry is questioned, not refused. Common bench sizes; no source. */
  usual?: [number, number];
  choices?: { value: string; words: string }[];
}

const number = (
  key: FieldKey,
  words: string,
  unit: string,
  help: string,
  usual?: [number, number],
): Field => ({
  key,
  words,
  kind: "number",
  unit,
  help,
  usual,
});
const toleranced = (
  key: FieldKey,
  words: string,
  unit: string,
  help: string,
  usual?: [number, number],
): Field => ({
  ...number(key, words, unit, help, usual),
  kind: "toleranced",
});

export const groups: { title: string; fields: Field[] }[] = [
  {
    title: "The run",
    fields: [
      {
        key: "coil",
        words: "coil",
        kind: "text",
        unit: "",
        help: "Its name; runs of one coil are compared on the coil’s sheet.",
      },
      { key: "taken", words: "taken on", kind: "text", unit: "", help: "The day, as 2026-11-30." },
      {
        key: "expected",
        words: "a spark is expected",
        kind: "choice",
        unit: "",
        help: "Where a spark is expected, a quiet pulse counts as a misfire.",
        choices: [
          { value: "spark", words: "yes" },
          { value: "no-spark", words: "no" },
        ],
      },
    ],
  },
  {
    title: "The ring",
    fields: [
      toleranced(
        "capacitor_F",
        "capacitor",
        "F",
        "The fitted capacitor. Its tolerance, as printed on it, is nearly always what limits L: ± 5 % of C is ± 5 % of L at the most, and is counted as a rectangular spread.",
        [1e-11, 1e-4],
      ),
      {
        key: "capacitorAcross",
        words: "it sits across the",
        kind: "choice",
        unit: "",
        help: "Decides how the supply adds to the switch’s stress.",
        choices: [
          { value: "coil", words: "coil" },
          { value: "switch", words: "switch" },
        ],
      },
      toleranced(
        "strayCapacitance_F",
        "stray capacitance",
        "F",
        "Winding, probe and switch together; unstated it counts as 0 and the reading says so.",
        [1e-13, 1e-8],
      ),
      toleranced(
        "knownInductance_H",
        "inductance, if known",
        "H",
        "With it, C is measured instead of L.",
        [1e-7, 10],
      ),
      number(
        "turnsRatio",
        "turns ratio",
        "",
        "Secondary over primary: refers the breakdown to the secondary.",
        [0.01, 500],
      ),
      number(
        "secondaryCapacitance_F",
        "secondary capacitance",
        "F",
        "What the secondary adds, reflected by the ratio’s square. Unstated, L is the effective inductance.",
        [1e-13, 1e-8],
      ),
      number("secondaryInductance_H", "secondary inductance", "H", "For the coupled ring.", [1e-6, 1e3]),
      number("coupling", "coupling", "", "0 to 1, between the windings.", [0.1, 1]),
    ],
  },
  {
    title: "The drive",
    fields: [
      number("supply_V", "supply", "V", "What the ring settles to, and what drives the ramp.", [0.5, 1000]),
      number("switchOnVoltage_V", "switch when on", "V", "Across the switch while it conducts.", [0, 10]),
      number(
        "externalResistance_ohm",
        "resistance outside the coil",
        "Ω",
        "Taken off the ramp’s resistance to leave the winding’s.",
        [0, 1000],
      ),
      number(
        "windingTemperature_C",
        "winding temperature",
        "°C",
        "Refers the winding’s resistance to 20 °C.",
        [-20, 180],
      ),
      number("repetitionRate_Hz", "repetition rate", "Hz", "For mean powers.", [0.01, 1e5]),
    ],
  },
  {
    title: "Ratings to warn about",
    fields: [
      number("switchRating_V", "switch rating", "V", "From 80 % on the kick is warned of.", [10, 2e4]),
      number(
        "probeRating_V",
        "probe rating",
        "V",
        "At its input. Beyond it, the probe and you are at risk.",
        [10, 1e5],
      ),
      number(
        "coilRating_V",
        "coil’s rating",
        "V",
        "Above it the insulation may break down inside.",
        [100, 2e5],
      ),
      number("capacitorRating_V", "capacitor rating", "V", "Its own voltage rating.", [10, 1e5]),
      number("capacitorPeakCurrent_A", "capacitor’s peak current", "A", "From its data sheet.", [0.01, 1e4]),
      number(
        "capacitorDvdt_V_per_s",
        "capacitor’s steepness",
        "V/s",
        "dv/dt from its data sheet; 100 V/µs is 100M here.",
        [1e5, 1e12],
      ),
      number("clampVoltage_V", "clamp voltage", "V", "Where a clamp cuts the kick.", [5, 2e4]),
      number("clampPower_W", "clamp’s mean power", "W", "From its data sheet.", [0.01, 1e4]),
    ],
  },
  {
    title: "The air",
    fields: [
      number("airTemperature_C", "air temperature", "°C", "For the gap’s expected breakdown.", [-20, 60]),
      number("airPressure_Pa", "air pressure", "Pa", "101 kPa at sea level.", [5e4, 1.1e5]),
    ],
  },
  {
    title: "How the file is read",
    fields: [
      number("sampleInterval_s", "sample interval", "s", "Only where the file does not tell it.", [1e-11, 1]),
      {
        key: "timeUnit",
        words: "unit of the time column",
        kind: "choice",
        unit: "",
        help: "Only where the file does not tell it.",
        choices: ["s", "ms", "us", "ns", "ps"].map((value) => ({ value, words: value.replace("u", "µ") })),
      },
      {
        key: "decimalMark",
        words: "decimal mark",
        kind: "choice",
        unit: "",
        help: "Only where point and comma could both be meant.",
        choices: [
          { value: ".", words: "point" },
          { value: ",", words: "comma" },
        ],
      },
      {
        key: "wide",
        words: "several columns are",
        kind: "choice",
        unit: "",
        help: "Channels taken together, or one shot in each column.",
        choices: [
          { value: "channels", words: "channels" },
          { value: "shots", words: "shots" },
        ],
      },
    ],
  },
];

export const allFields = groups.flatMap((group) => group.fields);
