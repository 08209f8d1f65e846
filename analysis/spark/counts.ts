/** Sparks, quiet, unclear and misfires with the rate's exact interval. */
import type { PulseReading, RunCounts, Verdict } from "../reading-format.ts";
import type { Setup } from "../setup/schema.ts";
import { clopperPearson } from "../statistics/proportion.ts";

const LEVEL = 0.95;

/** The user's own verdict wins over the program's. */
export const verdictOf = (pulse: PulseReading): Verdict =>
  pulse.ruled?.verdict ?? pulse.spark?.verdict ?? "unclear";

/**
 * Misfires are quiet pulses where the setup expects a spark, else null. The rate's value leaves unclear
 * pulses out, its bounds do not: low counts them all as sparks, high all as misfires.
 */
export function countPulses(pulses: PulseReading[], setup: Setup): RunCounts {
  const count = (verdict: Verdict) => pulses.filter((pulse) => verdictOf(pulse) === verdict).length;
  return countsOf({ sparks: count("spark"), quiet: count("no-spark"), unclear: count("unclear") }, setup);
}

/** The same from numbers already counted. */
export function countsOf(counted: Pick<RunCounts, "sparks" | "quiet" | "unclear">, setup: Setup): RunCounts {
  const { sparks, quiet, unclear } = counted;
  const all = sparks + quiet + unclear;
  const counts = { pulses: all, sparks, quiet, unclear };
  if (setup.expected !== "spark") return { ...counts, misfires: null, misfireRate: null };
  const misfireRate =
    all === 0
      ? null
      : {
          value: sparks + quiet > 0 ? quiet / (sparks + quiet) : null,
          low: clopperPearson(quiet, all, LEVEL).low,
          high: clopperPearson(quiet + unclear, all, LEVEL).high,
          level: LEVEL,
        };
  return { ...counts, misfires: quiet, misfireRate };
}
