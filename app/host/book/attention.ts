import type { Note } from "../../../analysis/capture.ts";
import { formatNumber } from "../../../analysis/format/figure.ts";
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
  const add = (kind: Attention["kind"], text: string, pulse: number | null, share?: number) =>
    found.push({ kind, text, capture, pulse, ...(share && { share }) });
  for (const pulse of reading.pulses) {
    for (const [kind, text, share] of ratings(pulse, setup)) add(kind, text, pulse.index, share);
    if ((pulse.ruled?.verdict ?? pulse.spark?.verdict) === "unclear")
      add("unclear", pulse.spark?.reasons[0] ?? "no verdict could be given", pulse.index);
    if (pulse.ring && pulse.ring.quality !== "good")
      add("poor-fit", pulse.ring.reason ?? `the ring's fit is ${pulse.ring.quality}`, pulse.index);
  }
  for (const { question, text, pulse } of reading.notes)
    if (question) add("question", `${text} ${question}`, pulse ?? null);
  return found;
}

const moved = new Set(["breakdown-changed", "breakdown-drifts", "q-changed"]);

/** What changed or drifted along the run. */
export const trendAttention = (notes: Note[]): Attention[] =>
  notes.flatMap(({ code, text }) =>
    moved.has(code) ? [{ kind: "moved" as const, text, capture: null, pulse: null }] : [],
  );

/** The nearer to its rating, the earlier; everything else keeps its order. */
export const worstFirst = (attention: Attention[]) =>
  attention.toSorted((a, b) => (b.share ?? 0) - (a.share ?? 0));

function ratings(pulse: PulseReading, setup: Setup): [Attention["kind"], string, number][] {
  const peak = pulse.peak_V ?? pulse.peakAtLeast_V ?? null;
  const secondary = pulse.spark?.breakdown_V ?? null;
  const stated: [string, number | null, number | null | undefined][] = [
    ["the switch's rating", peak, setup.switchRating_V],
    ["the probe's rating", peak, setup.probeRating_V],
    ["the capacitor's rating", peak, setup.capacitorRating_V],
    ["the coil's rating", secondary, setup.coilRating_V],
  ];
  return stated.flatMap(([part, volts, rating]): ReturnType<typeof ratings> => {
    if (volts === null || !rating || Math.abs(volts) < nearRating * rating) return [];
    const share = Math.abs(volts) / rating;
    const kind = share > 1 ? "over-rating" : "near-rating";
    const said = `${formatNumber(Math.abs(volts), "V", 3)} is ${Math.round(share * 100)} % of ${part}, ${formatNumber(rating, "V", 3)}`;
    return [[kind, said, share]];
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
