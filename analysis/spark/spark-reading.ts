/** The verdict of a pulse as it is printed and kept. */
import type { SparkReading, Verdict } from "../reading-format.ts";
import type { Judged } from "./judge.ts";
import type { SparkTimes } from "./onset.ts";
import { reasonsOf } from "./reasons.ts";
import type { SparkWindow } from "./window.ts";

/** A word is said when the other is less likely than one in ten. */
const SURE = 0.9;

export const verdictFor = (probability: number): Verdict =>
  probability > SURE ? "spark" : probability < 1 - SURE ? "no-spark" : "unclear";

export function sparkReading(judged: Judged, window: SparkWindow, times: SparkTimes): SparkReading {
  const { probability } = judged.likelihood;
  const verdict = verdictFor(probability);
  const reasons = reasonsOf(judged, window, times);
  const sparked = verdict !== "no-spark";
  return {
    verdict,
    probability,
    confidence: Math.max(probability, 1 - probability),
    onset_s: sparked ? times.onset_s : null,
    extinction_s: sparked ? times.extinction_s : null,
    breakdown_V: null,
    breakdownFrom: null,
    strikes:
      sparked && times.onset_s !== null ? [{ onset_s: times.onset_s, extinction_s: times.extinction_s }] : [],
    judgedAgainst: judged.reference ? "run" : "itself",
    reasons: reasons.map(({ text }) => text),
    places_s: reasons.map(({ place_s }) => place_s),
  };
}

/** Nothing to judge by: said so, with even odds. */
export function noEvidence(text: string, place_s: number | null): SparkReading {
  return {
    verdict: "unclear",
    probability: 0.5,
    confidence: 0.5,
    onset_s: null,
    extinction_s: null,
    breakdown_V: null,
    breakdownFrom: null,
    strikes: [],
    judgedAgainst: "itself",
    reasons: [text],
    places_s: [place_s],
  };
}
