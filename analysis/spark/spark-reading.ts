/** The verdict of a pulse as it is printed and kept. */
import { formatNumber } from "../format/figure.ts";
import type { SparkReading, Strike, Verdict } from "../reading-format.ts";
import { collapseShare, type Breakdown } from "./account.ts";
import type { Judged } from "./judge.ts";
import type { SparkTimes } from "./onset.ts";
import { reasonsOf, type Reason } from "./reasons.ts";
import type { SparkWindow } from "./window.ts";

/** A word is said when the other is less likely than one in ten. */
const SURE = 0.9;

export const verdictFor = (probability: number): Verdict =>
  probability > SURE ? "spark" : probability < 1 - SURE ? "no-spark" : "unclear";

export function sparkReading(
  judged: Judged,
  window: SparkWindow,
  times: SparkTimes,
  breakdown: Breakdown | null,
): SparkReading {
  const seen = withSecondary(judged.likelihood.probability, window, comparable(judged));
  const verdict = verdictFor(seen.probability);
  const sparked = verdict !== "no-spark";
  const strikes = sparked ? strikesOf(window, times) : [];
  const reasons = [
    ...seen.reasons,
    ...(agree(seen.probability, judged) ? reasonsOf(judged, window, times) : []),
    ...breakdownReason(sparked ? breakdown : null, strikes[0]?.onset_s ?? null),
  ];
  return {
    verdict,
    probability: seen.probability,
    confidence: Math.max(seen.probability, 1 - seen.probability),
    onset_s: strikes[0]?.onset_s ?? null,
    extinction_s: strikes[strikes.length - 1]?.extinction_s ?? null,
    breakdown_V: sparked ? (breakdown?.value ?? null) : null,
    breakdownFrom: sparked ? (breakdown?.from ?? null) : null,
    strikes,
    judgedAgainst: judged.reference ? "run" : "itself",
    reasons: reasons.map(({ text }) => text),
    places_s: reasons.map(({ place_s }) => place_s),
  };
}

/** Whether something of the run or of the circuit says what this pulse would be without a spark. */
const comparable = ({ quietRest, likelihood }: Judged) =>
  quietRest !== null || likelihood.because === "volt-seconds" || likelihood.because === "burn-line";

/** The primary's reasons are given where they speak for the same word. */
const agree = (probability: number, { likelihood }: Judged) =>
  probability > 0.5 === likelihood.probability > 0.5 || verdictFor(likelihood.probability) === "unclear";

/** The secondary's own trace decides: a collapse is a spark; without one only the primary's clear word stands. */
function withSecondary(primary: number, window: SparkWindow, againstRun: boolean) {
  const { secondary, zero_s, raw } = window;
  const { probability, reasons } = againstRun
    ? { probability: primary, reasons: [] as Reason[] }
    : freeEnough(primary, window);
  if (!secondary) return { probability, reasons };
  const first = secondary.strikes[0];
  if (!first) return { probability: probability > SURE ? probability : probability * 0.3, reasons };
  const at = raw.start_s + first.onset * raw.step_s;
  const what =
    first.breakdown_V === null
      ? "the secondary's current sets in"
      : `the secondary's voltage collapses from ${formatNumber(Math.abs(first.breakdown_V), "V", 3)}`;
  const text = `${what} ${formatNumber(at - zero_s, "s", 3)} after switch-off`;
  return { probability: 0.999, reasons: [{ text, place_s: at }] };
}

/**
 * A ring cut at ground loses a part of every cycle, with or without a spark: its losses say nothing
 * certain, unless other pulses of the run show what they are without one. */
function freeEnough(probability: number, { cutBelow, zero_s }: SparkWindow) {
  if (!cutBelow) return { probability, reasons: [] as Reason[] };
  const text =
    "the ring's half-waves are cut flat at one level: it is no free ring, and a spark cannot be told";
  return { probability: Math.min(0.6, Math.max(0.4, probability)), reasons: [{ text, place_s: zero_s }] };
}

/** From the secondary where it is on screen, else the one stretch the node shows. */
function strikesOf(window: SparkWindow, times: SparkTimes): Strike[] {
  const { secondary, raw } = window;
  const between = collapseShare(window, times);
  if (secondary && secondary.strikes.length > 0)
    return secondary.strikes.map(({ onset, extinction }, k) => ({
      onset_s: raw.start_s + (k === 0 && between ? onset - 0.5 + between.share : onset) * raw.step_s,
      extinction_s: extinction === null ? null : raw.start_s + extinction * raw.step_s,
    }));
  return times.onset_s === null ? [] : [{ onset_s: times.onset_s, extinction_s: times.extinction_s }];
}

function breakdownReason(breakdown: Breakdown | null, place_s: number | null): Reason[] {
  if (breakdown?.from !== "ratio") return [];
  const text = `breakdown near ${formatNumber(breakdown.value, "V", 2)}, referred from the switch node through the stated turns ratio`;
  return [{ text, place_s }];
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
