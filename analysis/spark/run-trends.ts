/** What a run tells beyond its counts: when and at what voltage it struck, and whether that moved along the run. */
import type { Note } from "../capture.ts";
import { formatNumber } from "../format/figure.ts";
import { median, robustSpread } from "../numeric/median.ts";
import type { PulseReading } from "../reading-format.ts";
import type { Setup } from "../setup/schema.ts";
import { changePoint, type ChangePoint } from "../statistics/change-point.ts";
import { driftOf, type Drift } from "../statistics/drift.ts";
import { fitWeibull } from "../statistics/weibull.ts";
import { verdictOf } from "./counts.ts";
import { gapLine, type GapLine } from "./gap-line.ts";

type Bounded = { value: number; low: number; high: number };

export interface RunTrends {
  /** After switch-off. */
  onset_s: { median: number; spread: number; sparks: number } | null;
  /** Right-censored Weibull fit of the breakdown voltages (IEC 62539); null with fewer than three. */
  breakdown_V: {
    scale_V: Bounded;
    shape: Bounded;
    /** Value below which one breakdown in ten lies. */
    tenth_V: Bounded;
    level: number;
    broke: number;
    held: number;
    from: "secondary" | "ratio";
  } | null;
  /** Breakdown voltage against pulse number. */
  breakdownDrift: Drift | null;
  breakdownChange: ChangePoint | null;
  /** Quality of the quiet ring against pulse number: shorted turns take it down. */
  qChange: ChangePoint | null;
  gapLine: GapLine | null;
}

/** `held_V`: largest secondary voltage of each pulse that held, null where it is not on screen. */
export function runTrends(pulses: PulseReading[], held_V: (number | null)[], setup: Setup): RunTrends {
  const broke = breakdownsOf(pulses);
  const values = broke.points.map(({ value }) => value);
  return {
    onset_s: onsetsOf(pulses.filter((pulse) => verdictOf(pulse) === "spark")),
    breakdown_V: broke.from ? weibullOf(values, broke.from === "secondary" ? held_V : [], broke.from) : null,
    breakdownDrift: driftOf(broke.points),
    breakdownChange: changePoint(values),
    qChange: changePoint(quietQ(pulses).map(({ value }) => value)),
    gapLine: gapLine(setup),
  };
}

/** Quality of the quiet pulses' rings; `x` counts the run's pulses from 0. */
export const quietQ = (pulses: PulseReading[]): { x: number; value: number }[] =>
  pulses.flatMap((pulse, x) =>
    verdictOf(pulse) === "no-spark" && pulse.ring?.modes[0]
      ? [{ x, value: pulse.ring.modes[0].q.value }]
      : [],
  );

function onsetsOf(sparks: PulseReading[]): RunTrends["onset_s"] {
  const onsets = sparks.flatMap(({ spark, switchOffTime_s }) =>
    spark?.onset_s != null && switchOffTime_s !== null ? [spark.onset_s - switchOffTime_s] : [],
  );
  if (onsets.length === 0) return null;
  return { median: median(onsets), spread: robustSpread(onsets), sparks: onsets.length };
}

const fewestForAFit = 3;

/**
 * Breakdown voltages of a run's sparks, from one source alone: those measured at the secondary where they
 * are enough for a fit or the others are not, else those referred through the turns ratio. `x` counts the
 * run's pulses from 0.
 */
export function breakdownsOf(pulses: PulseReading[]) {
  const of = (from: "secondary" | "ratio") =>
    pulses.flatMap((pulse, x) => {
      const { spark, u } = pulse;
      if (verdictOf(pulse) !== "spark" || spark?.breakdown_V == null || spark.breakdownFrom !== from)
        return [];
      return [{ x, value: spark.breakdown_V, u: u["spark.breakdown_V"] ?? 0 }];
    });
  const [measured, referred] = [of("secondary"), of("ratio")];
  if (measured.length >= fewestForAFit || (measured.length > 0 && referred.length < fewestForAFit))
    return { points: measured, from: "secondary" as const };
  return { points: referred, from: referred.length > 0 ? ("ratio" as const) : null };
}

function weibullOf(
  values: number[],
  held_V: (number | null)[],
  from: "secondary" | "ratio",
): RunTrends["breakdown_V"] {
  const fit = fitWeibull(
    values,
    held_V.filter((value) => value !== null),
  );
  if (!fit) return null;
  return {
    scale_V: fit.scale,
    shape: fit.shape,
    tenth_V: fit.quantile(0.1),
    level: fit.level,
    broke: fit.failures,
    held: fit.censored,
    from,
  };
}

/** What in the trends a person should look at. */
export function trendNotes({
  breakdown_V,
  breakdownDrift,
  breakdownChange,
  qChange,
  gapLine: line,
}: RunTrends): Note[] {
  const notes: Note[] = [];
  if (breakdownChange)
    notes.push({
      code: "breakdown-changed",
      text: `The breakdown voltage changed at spark ${breakdownChange.index + 1} of the run, from about ${formatNumber(breakdownChange.before, "V", 2)} to ${formatNumber(breakdownChange.after, "V", 2)}.`,
    });
  else if (breakdownDrift?.drifts)
    notes.push({
      code: "breakdown-drifts",
      text: `The breakdown voltage drifts by ${formatNumber(breakdownDrift.slope.value, "V", 2)} a pulse.`,
    });
  if (qChange)
    notes.push({
      code: "q-changed",
      text: `The quiet ring's Q changed at quiet pulse ${qChange.index + 1}, from ${qChange.before.toPrecision(3)} to ${qChange.after.toPrecision(3)}.`,
    });
  if (line && breakdown_V)
    notes.push({
      code: "gap-line",
      text: `For plausibility only: ${line.text}, would stand about ${formatNumber(line.voltage_V, "V", 2)} at relative air density ${line.airDensity.toFixed(2)}; 63 % of breakdowns lie below ${formatNumber(breakdown_V.scale_V.value, "V", 2)}.`,
    });
  return notes;
}
