/** What the program concludes of a pulse, as short written notes, each with the place it speaks of. */
import type { CaptureReading, PulseReading, SparkReading } from "../../analysis/reading-format.ts";
import type { Setup } from "../../analysis/setup/schema.ts";
import { figureText, percent, plain, stated } from "../format/figure.ts";
import { verdictWord } from "../format/words.ts";

export type Tone = "ink" | "fit" | "spark" | "warning";

export interface MarginNote {
  id: string;
  title: string;
  text: string;
  tone: Tone;
  /** On the record's time axis; null where it speaks of no one place. */
  place_s: number | null;
}

/** From here on a peak is too near a stated rating (design rule of the project: 80 %). */
export const nearRating = 0.8;

export function marginNotes(reading: CaptureReading, pulse: PulseReading, setup: Setup): MarginNote[] {
  const notes = [
    switchOffNote(pulse),
    kickNote(pulse, setup),
    ringNote(pulse),
    ...sparkNotes(pulse, setup),
    ...otherNotes(reading, pulse),
  ];
  return notes.filter((note) => note !== null);
}

function switchOffNote({ switchOffTime_s, dwell_s, ramp }: PulseReading): MarginNote | null {
  if (switchOffTime_s === null) return null;
  const current = ramp?.finalCurrent_A ? `, at ${plain(ramp.finalCurrent_A.value, "A")}` : "";
  const text = dwell_s === null ? "" : `After conducting for ${plain(dwell_s, "s")}${current}.`;
  return { id: "switch-off", title: "Switch-off", text, tone: "ink", place_s: switchOffTime_s };
}

function kickNote(pulse: PulseReading, setup: Setup): MarginNote | null {
  const { peak_V, peakAtLeast_V, peakTime_s, expectedPeak_V, switchOffTime_s } = pulse;
  const rating = setup.switchRating_V ?? null;
  const shown = peak_V ?? peakAtLeast_V ?? null;
  if (shown === null) return null;
  const share = rating === null ? null : Math.abs(shown) / rating;
  const near = share !== null && share >= nearRating;
  const sentences = [
    share === null ? "" : `${percent(share)} of the switch’s ${stated(rating, "V")}.`,
    peak_V === null ? "The screen cut it off: the real peak is higher." : "",
    expectedPeak_V === null ? "" : `Without losses ${plain(expectedPeak_V, "V")} was to be expected.`,
  ];
  return {
    id: "kick",
    title: `${near ? "! " : ""}Kick ${peak_V === null ? "above " : ""}${plain(shown, "V")}`,
    text: sentences.filter(Boolean).join(" "),
    tone: near ? "warning" : "ink",
    place_s: peakTime_s ?? switchOffTime_s,
  };
}

function ringNote(pulse: PulseReading): MarginNote | null {
  const { ring } = pulse;
  if (!ring) return null;
  const [mode, second] = ring.modes;
  const place_s =
    ring.from_s === null || ring.to_s === null ? null : ring.from_s + (ring.to_s - ring.from_s) * 0.4;
  if (!mode || ring.quality === "refused")
    return {
      id: "ring",
      title: "Ring not fitted",
      text: sentence(ring.reason ?? ""),
      tone: "warning",
      place_s,
    };
  const sentences = [
    `Q ${figureText(mode.q, "")}.`,
    pulse.inductance_H ? `L ${figureText(pulse.inductance_H, "H")}.` : "",
    second ? `A second mode at ${plain(second.frequency_Hz.value, "Hz")}.` : "",
    ring.quality === "poor" ? `Poor fit: ${ring.reason ?? "see the residuals"}.` : "",
  ];
  return {
    id: "ring",
    title: `Ring ${figureText(mode.frequency_Hz, "Hz")}`,
    text: sentences.filter(Boolean).join(" ").replace(/\.\.$/, "."),
    tone: ring.quality === "poor" ? "warning" : "fit",
    place_s,
  };
}

function sparkNotes(pulse: PulseReading, setup: Setup): MarginNote[] {
  const { spark } = pulse;
  if (!spark) return [];
  const reasons = spark.reasons.map((text, at) => ({
    text: sentence(text),
    place_s: spark.places_s[at] ?? null,
  }));
  // A verdict without an onset stands where its first reason points.
  const place_s = spark.onset_s ?? reasons.find((reason) => reason.place_s !== null)?.place_s ?? null;
  // What is said of the same instant, to a fraction of the ring's period, stands in one note.
  const reach_s = 0.2 / (pulse.ring?.modes[0]?.frequency_Hz.value ?? Infinity);
  const near = (place: number | null) =>
    place === null || (place_s !== null && Math.abs(place - place_s) <= reach_s);
  const own = reasons.filter((reason) => near(reason.place_s)).map((reason) => reason.text);
  const elsewhere = reasons.filter((reason) => !near(reason.place_s)).slice(0, 3);
  return [
    verdictNote(pulse, spark, setup, own, place_s),
    ...elsewhere.map(({ text, place_s }, at) => ({
      id: `why-${at}`,
      ...split(text),
      tone: "ink" as Tone,
      place_s,
    })),
    ...extinctionNote(pulse, spark),
  ];
}

function verdictNote(
  pulse: PulseReading,
  spark: SparkReading,
  setup: Setup,
  why: string[],
  place_s: number | null,
): MarginNote {
  const { verdict, onset_s, breakdown_V, breakdownFrom } = spark;
  const after = onset_s === null ? null : onset_s - (pulse.switchOffTime_s ?? 0);
  const word = verdictWord(verdict, setup.expected);
  const title = `${word[0].toUpperCase()}${word.slice(1)}`;
  const breakdown =
    breakdown_V === null || why.some((reason) => /breakdown/i.test(reason))
      ? ""
      : `Breakdown ${plain(breakdown_V, "V")}${from(breakdownFrom)}.`;
  return {
    id: "spark",
    title: verdict === "spark" && after !== null ? `${title}, ${plain(after, "s")} after switch-off` : title,
    text: [...why.slice(0, 3), breakdown].filter(Boolean).join(" "),
    tone: verdict === "no-spark" ? "ink" : verdict === "spark" ? "spark" : "warning",
    place_s,
  };
}

const from = (source: SparkReading["breakdownFrom"]) => (source === "ratio" ? " by the turns ratio" : "");

function extinctionNote(pulse: PulseReading, { onset_s, extinction_s, strikes }: SparkReading): MarginNote[] {
  if (onset_s === null || extinction_s === null) return [];
  const several = strikes.length > 1 ? `${strikes.length} strikes in this pulse. ` : "";
  const energy = pulse.energy_J.spark === null ? "" : `The arc took ${plain(pulse.energy_J.spark, "J", 2)}.`;
  return [
    {
      id: "extinction",
      title: `Burns for ${plain(extinction_s - onset_s, "s")}`,
      text: several + energy,
      tone: "ink",
      place_s: extinction_s,
    },
  ];
}

/** Notes of the reading that speak of this pulse and are not said above. */
function otherNotes(reading: CaptureReading, pulse: PulseReading): MarginNote[] {
  return reading.notes
    .filter((note) => note.pulse === pulse.index)
    .slice(0, 2)
    .map((note, at) => ({
      id: `note-${at}`,
      ...split(sentence(note.text)),
      tone: "ink" as Tone,
      place_s: null,
    }));
}

const sentence = (text: string) => {
  const whole = text === "" ? text : text[0].toUpperCase() + text.slice(1);
  return /[.!?]$/.test(whole) ? whole : `${whole}.`;
};

const longestTitle = 56;

/** A short first clause becomes the title; a short sentence is all title. */
function split(text: string): { title: string; text: string } {
  if (text.length <= longestTitle) return { title: text.replace(/\.$/, ""), text: "" };
  const at = /[:;,(] ?/.exec(text);
  if (!at || at.index < 4 || at.index > longestTitle) return { title: "Also", text };
  const rest = text.slice(at.index + at[0].length);
  return {
    title: text.slice(0, at.index).trim(),
    text: sentence(at[0].startsWith("(") ? rest.replace(")", "") : rest),
  };
}
