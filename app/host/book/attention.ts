import type { CaptureReading, PulseReading } from "../../../analysis/reading-format.ts";
import type { Setup } from "../../../analysis/setup/schema.ts";
import type { Attention } from "../../bridge.ts";

/** Warnings start at this share of any stated rating. */
const nearRating = 0.8;

interface Kept {
  capture: number;
  setup: Setup;
  reading: CaptureReading;
}

/** What needs the user's eye first in one capture: ratings, then doubts, then questions. */
export function attentionOf({ capture, setup, reading }: Kept): Attention[] {
  const found: Attention[] = [];
  const add = (kind: Attention["kind"], text: string, pulse: number | null) =>
    found.push({ kind, text, capture, pulse });
  for (const pulse of reading.pulses) {
    for (const [kind, text] of ratings(pulse, setup)) add(kind, text, pulse.index);
    if ((pulse.ruled?.verdict ?? pulse.spark?.verdict) === "unclear")
      add("unclear", pulse.spark?.reasons[0] ?? "no verdict could be given", pulse.index);
    if (pulse.ring && pulse.ring.quality !== "good")
      add("poor-fit", pulse.ring.reason ?? `the ring's fit is ${pulse.ring.quality}`, pulse.index);
  }
  for (const { question, text, pulse } of reading.notes)
    if (question) add("question", `${text} ${question}`, pulse ?? null);
  return found;
}

function ratings(pulse: PulseReading, setup: Setup): [Attention["kind"], string][] {
  const peak = pulse.peak_V ?? pulse.peakAtLeast_V ?? null;
  const secondary = pulse.spark?.breakdown_V ?? null;
  const stated: [string, number | null, number | null | undefined][] = [
    ["the switch's rating", peak, setup.switchRating_V],
    ["the probe's rating", peak, setup.probeRating_V],
    ["the capacitor's rating", peak, setup.capacitorRating_V],
    ["the coil's rating", secondary, setup.coilRating_V],
  ];
  return stated.flatMap(([part, volts, rating]): [Attention["kind"], string][] => {
    if (volts === null || !rating || Math.abs(volts) < nearRating * rating) return [];
    const share = Math.round((Math.abs(volts) / rating) * 100);
    const kind = Math.abs(volts) > rating ? "over-rating" : "near-rating";
    return [[kind, `${Math.round(Math.abs(volts))} V is ${share} % of ${part}, ${rating} V`]];
  });
}

/** The statements whose absence costs figures. */
export function missingStatements(setup: Setup): Attention[] {
  const missing: [boolean, string][] = [
    [
      setup.capacitor_F == null && setup.knownInductance_H == null,
      "neither the capacitor nor the inductance is stated: the ring gives its period, but no L, C and R",
    ],
    [setup.switchRating_V == null, "the switch's rating is not stated: no margin can be given"],
    [setup.supply_V == null, "the supply is not stated: the ramp gives only its time constant"],
  ];
  return missing.flatMap(([is, text]) =>
    is ? [{ kind: "setup-missing" as const, text, capture: null, pulse: null }] : [],
  );
}
