/** Two runs side by side: the difference of what was measured, and of how often it misfired. */
import type { CaptureReading, Figure, RunCounts } from "../reading-format.ts";
import { rateDifference, type Interval } from "../statistics/proportion.ts";

export interface RunFigures {
  counts: RunCounts;
  combined: CaptureReading["combined"];
}

export interface RunComparison {
  /** Second less first. */
  inductance_H: Figure;
  resistance_ohm: Figure;
  q: Figure;
  /** Share of quiet pulses among those that were judged, second less first; null without such pulses. */
  quietRate: ({ value: number; level: number } & Interval) | null;
}

const level = 0.95;

/**
 * Uncertainties add as if independent: parts common to both runs (the same capacitor) make the difference
 * surer than it is stated, never less sure.
 */
export function compareRuns(first: RunFigures, second: RunFigures): RunComparison {
  const less = (a: Figure, b: Figure): Figure =>
    a && b ? { value: b.value - a.value, u: Math.hypot(a.u, b.u) } : null;
  const tally = ({ counts }: RunFigures) => ({ hits: counts.quiet, trials: counts.quiet + counts.sparks });
  const rate = rateDifference(tally(first), tally(second), level);
  return {
    inductance_H: less(first.combined.inductance_H, second.combined.inductance_H),
    resistance_ohm: less(first.combined.resistance_ohm, second.combined.resistance_ohm),
    q: less(first.combined.q, second.combined.q),
    quietRate: rate && { ...rate, level },
  };
}
