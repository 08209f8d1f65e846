/** Sentences made of figures: counts, verdicts, times. */
import type { RunCounts, Verdict } from "../../analysis/reading-format.ts";
import { percent } from "./figure.ts";

export const plural = (count: number, one: string, many = `${one}s`) =>
  `${count} ${count === 1 ? one : many}`;

/** 42 pulses: 33 sparked, 8 misfired, 1 unclear. Misfire rate 19.5 % (8.6 to 36.8 % at 95 %). */
export function countsSentence(counts: RunCounts): string {
  const { pulses, sparks, quiet, unclear, misfires } = counts;
  if (pulses === 0) return "No pulse was found.";
  const parts = [`${sparks} sparked`];
  if (misfires === null) parts.push(`${quiet} stayed quiet`);
  else parts.push(`${misfires} misfired`);
  if (unclear > 0) parts.push(`${unclear} unclear`);
  return `${plural(pulses, "pulse")}: ${parts.join(", ")}.${rateSentence(counts)}`;
}

function rateSentence({ misfireRate: rate }: RunCounts): string {
  if (!rate) return "";
  const bounds = `${percent(rate.low, 1).replace(/\s?%/u, "")} to ${percent(rate.high, 1)} at ${percent(rate.level)}`;
  return rate.value === null
    ? ` Misfire rate between ${bounds}.`
    : ` Misfire rate ${percent(rate.value, 1)} (${bounds}).`;
}

export function verdictWord(verdict: Verdict | null, expected: string | null | undefined): string {
  if (verdict === "spark") return "spark";
  if (verdict === "unclear") return "unclear";
  if (verdict === null) return "not judged";
  return expected === "spark" ? "misfire" : "no spark";
}

export function timeLeft(seconds: number | null): string {
  if (seconds === null || !Number.isFinite(seconds)) return "";
  if (seconds < 1) return "nearly there";
  if (seconds < 90) return `about ${Math.round(seconds)} s left`;
  return `about ${Math.round(seconds / 60)} min left`;
}

/** "2026-11-30" → "30 November 2026"; anything else stays as it was written. */
export function dayText(date: string | null): string {
  if (!date) return "";
  const parsed = /^\d{4}-\d{2}-\d{2}/.test(date) ? new Date(`${date.slice(0, 10)}T00:00:00Z`) : null;
  if (!parsed || Number.isNaN(parsed.getTime())) return date;
  return parsed.toLocaleDateString("en-GB", {
    day: "numeric",
    month: "long",
    year: "numeric",
    timeZone: "UTC",
  });
}

/** "C:\\bench\\pulse-01.csv" → "pulse-01.csv": the page has no room for folders, the title holds them. */
export const fileName = (path: string) => path.split(/[\\/]/).at(-1) || path;
