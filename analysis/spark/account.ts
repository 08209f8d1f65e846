/** The energy an arc took from the ring, and the breakdown voltage as far as the primary side tells it. */
import type { PulseEvidence } from "../evidence.ts";
import type { Measured } from "../reading-format.ts";
import type { Setup } from "../setup/schema.ts";
import { standard } from "../setup/toleranced.ts";
import type { Judged } from "./judge.ts";
import { sizeAt } from "./split.ts";
import type { Traits } from "./traits.ts";
import type { SparkTimes } from "./onset.ts";
import type { SparkWindow } from "./window.ts";

/**
 * ½·C·(A² − B²): A the amplitude the quiet ring would have where the free ring begins again, B what it has.
 * So the quiet ring's own loss is left out. C is the capacitance the low mode sees: stated, plus the
 * secondary's reflected by the square of the turns ratio. Null without C, a quiet ring or an end of the arc.
 */
export function sparkEnergy_J(
  judged: Judged,
  pulse: PulseEvidence,
  setup: Setup,
  window: SparkWindow,
): Measured | null {
  const { traits, reference } = judged;
  const capacitance = pulse.capacitance_F ?? stated(setup);
  if (!capacitance || !traits.ringAfter) return null;
  const reflected = (setup.secondaryCapacitance_F ?? 0) * (setup.turnsRatio ?? 0) ** 2;
  const decay = traits.modes[0].decay_per_s;
  const left = sizeAt(traits.sums, traits.split.after, traits.b);
  const rest = judged.quietRest;
  const quiet = rest
    ? Math.hypot(...rest) * Math.exp(-decay * (window.first_s + traits.b * window.step_s))
    : traits.ringBefore
      ? sizeAt(traits.sums, traits.split.before, traits.a) *
        Math.exp(-decay * (traits.b - traits.a) * window.step_s)
      : null;
  if (quiet === null || quiet <= left) return null;
  const c = capacitance.value + reflected;
  const value = 0.5 * c * (quiet * quiet - left * left);
  const stray = reference?.stray ?? 0.03;
  const u = Math.hypot((value * capacitance.u) / c, c * quiet * quiet * stray);
  return { value, u };
}

/** A refused ring has no capacitance of its own; the stated one holds for it as well. */
function stated(setup: Setup): Measured | null {
  const capacitor = standard(setup.capacitor_F);
  if (!capacitor) return null;
  const stray = standard(setup.strayCapacitance_F) ?? { value: 0, u: 0 };
  return { value: capacitor.value + stray.value, u: Math.hypot(capacitor.u, stray.u) };
}

export interface Breakdown {
  value: number;
  u: number;
  from: "secondary" | "ratio";
}

/**
 * From the secondary's trace, else the node's swing about its settled level times the stated turns ratio;
 * null where noise and the onset's doubt leave no figure. `traits`: null where the onset is no more than a guess.
 */
export function breakdownOf(
  window: SparkWindow,
  setup: Setup,
  traits: Traits | null,
  times: SparkTimes,
): Breakdown | null {
  const measured = window.secondary?.strikes[0];
  if (measured?.breakdown_V) {
    const between = collapseShare(window, times);
    const read = between && measured.rise?.(between.share, between.u);
    const value = Math.abs(read ? read.value_V : measured.breakdown_V);
    const u = read ? read.u_V : (measured.breakdownUncertainty_V ?? 0);
    // A probe's own scale: two percent, common practice, no source.
    return { value, u: Math.hypot(0.02 * value, u), from: "secondary" };
  }
  if (!setup.turnsRatio || times.block === null || !traits) return null;
  const { values, count } = window.blocks;
  const block = Math.min(count - 2, Math.max(1, Math.round(times.block)));
  const swing = Math.abs(values[block] - traits.split.after.coefficients[0]);
  const slope = Math.abs(values[block + 1] - values[block - 1]) / 2;
  // Leakage keeps some of the swing from the secondary, or adds to it: a fifth, common practice, no source.
  const u = Math.hypot(0.2 * swing, slope, Math.sqrt(traits.split.variance));
  if (swing < LEAST_BREAKDOWN * u) return null;
  return { value: swing * setup.turnsRatio, u: u * setup.turnsRatio, from: "ratio" };
}

/** Samples beside the collapse's own two within which the node's onset is the same event. */
const BESIDE = 1;

/**
 * Where between two samples the secondary collapsed, as a share from the first, by the instant at which the node
 * leaves its course: that is known to a fraction of a sample. Null where the node tells no better.
 */
export function collapseShare(
  { secondary, raw }: SparkWindow,
  { onset_s, onsetUncertainty_s, sharp }: SparkTimes,
): { share: number; u: number } | null {
  const first = secondary?.strikes[0];
  if (!first || !sharp || onset_s === null || onsetUncertainty_s === null) return null;
  const u = onsetUncertainty_s / raw.step_s;
  const share = (onset_s - raw.start_s) / raw.step_s - (first.onset - 0.5);
  if (!(u < EVENLY) || share < -BESIDE || share > 1 + BESIDE) return null;
  return { share: Math.min(1, Math.max(0, share)), u };
}

/** Standard uncertainty of a place evenly spread over a sample. */
const EVENLY = 1 / Math.sqrt(12);

/** Below so many times its uncertainty a referred voltage says nothing. */
const LEAST_BREAKDOWN = 2;
