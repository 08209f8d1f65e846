/** Every field of the setup card: its words, its unit, what it is for, and what is usual. */
import { choiceWords, fieldWords, type FieldKey } from "../../analysis/setup/words.ts";

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
type Definition = Pick<Field, "key" | "kind" | "help" | "usual">;

const number = (key: FieldKey, help: string, usual?: [number, number]): Definition => ({
  key,
  kind: "number",
  help,
  usual,
});
const toleranced = (key: FieldKey, help: string, usual?: [number, number]): Definition => ({
  ...number(key, help, usual),
  kind: "toleranced",
});

const definitions: { title: string; fields: Definition[] }[] = [
  {
    title: "The run",
    fields: [
      {
        key: "coil",
        kind: "text",
        help: "Its name; runs of one coil are compared on the coil’s sheet.",
      },
      { key: "taken", kind: "text", help: "The day, as 2026-11-30." },
      {
        key: "expected",
        kind: "choice",
        help: "Where a spark is expected, a quiet pulse counts as a misfire.",
      },
    ],
  },
  {
    title: "The ring",
    fields: [
      toleranced(
        "capacitor_F",
        "The fitted capacitor. Its tolerance, as printed on it, is nearly always what limits L: ± 5 % of C is ± 5 % of L at the most, and is counted as a rectangular spread.",
        [1e-11, 1e-4],
      ),
      {
        key: "capacitorAcross",
        kind: "choice",
        help: "Decides how the supply adds to the switch’s stress.",
      },
      toleranced(
        "strayCapacitance_F",
        "Winding, probe and switch together; unstated it counts as 0 and the reading says so.",
        [1e-13, 1e-8],
      ),
      toleranced("knownInductance_H", "With it, C is measured instead of L.", [1e-7, 10]),
      number("turnsRatio", "Secondary over primary: refers the breakdown to the secondary.", [0.01, 500]),
      number(
        "secondaryCapacitance_F",
        "What the secondary adds, reflected by the ratio’s square. Unstated, L is the effective inductance.",
        [1e-13, 1e-8],
      ),
      number("secondaryInductance_H", "For the coupled ring.", [1e-6, 1e3]),
      number("coupling", "0 to 1, between the windings.", [0.1, 1]),
    ],
  },
  {
    title: "The drive",
    fields: [
      number("supply_V", "What the ring settles to, and what drives the ramp.", [0.5, 1000]),
      number("switchOnVoltage_V", "Across the switch while it conducts.", [0, 10]),
      number("externalResistance_ohm", "Taken off the ramp’s resistance to leave the winding’s.", [0, 1000]),
      number("windingTemperature_C", "Refers the winding’s resistance to 20 °C.", [-20, 180]),
      number("repetitionRate_Hz", "For mean powers.", [0.01, 1e5]),
    ],
  },
  {
    title: "Ratings to warn about",
    fields: [
      number("switchRating_V", "From 80 % on the kick is warned of.", [10, 2e4]),
      number("probeRating_V", "At its input. Beyond it, the probe and you are at risk.", [10, 1e5]),
      number("coilRating_V", "Above it the insulation may break down inside.", [100, 2e5]),
      number("capacitorRating_V", "Its own voltage rating.", [10, 1e5]),
      number("capacitorPeakCurrent_A", "From its data sheet.", [0.01, 1e4]),
      number("capacitorDvdt_V_per_s", "dv/dt from its data sheet; 100 V/µs is 100M here.", [1e5, 1e12]),
      number("clampVoltage_V", "Where a clamp cuts the kick.", [5, 2e4]),
      number("clampPower_W", "From its data sheet.", [0.01, 1e4]),
    ],
  },
  {
    title: "The air",
    fields: [
      number("airTemperature_C", "For the gap’s expected breakdown.", [-20, 60]),
      number("airPressure_Pa", "101 kPa at sea level.", [5e4, 1.1e5]),
    ],
  },
  {
    title: "How the file is read",
    fields: [
      number("sampleInterval_s", "Only where the file does not tell it.", [1e-11, 1]),
      {
        key: "timeUnit",
        kind: "choice",
        help: "Only where the file does not tell it.",
      },
      {
        key: "decimalMark",
        kind: "choice",
        help: "Only where point and comma could both be meant.",
      },
      {
        key: "wide",
        kind: "choice",
        help: "Channels taken together, or one shot in each column.",
      },
    ],
  },
];

/** A choice's words are those of its value. */
function fieldOf(definition: Definition): Field {
  const choices = Object.entries(choiceWords[definition.key] ?? {});
  return {
    ...fieldWords[definition.key],
    ...definition,
    ...(definition.kind === "choice" && { choices: choices.map(([value, words]) => ({ value, words })) }),
  };
}

export const groups = definitions.map(({ title, fields }) => ({ title, fields: fields.map(fieldOf) }));

export const allFields = groups.flatMap((group) => group.fields);
