import type { PulseReading } from "../../../analysis/reading-format.ts";
import { changePoint } from "../../../analysis/statistics/change-point.ts";
import { driftOf } from "../../../analysis/statistics/drift.ts";
import { breakdownsOf, quietQ, type RunTrends } from "../../../analysis/spark/run-trends.ts";
import { verdictOf } from "../../../analysis/spark/counts.ts";
import type { CaptureDetail, CourseChange, RunCourse } from "../../bridge.ts";

const day_s = 86_400;

/** A run's pulses one after the other: when each came, when and at what voltage it sparked. */
export function courseOf(captures: CaptureDetail[], trends: RunTrends | null): RunCourse {
  const pulses = captures.flatMap(({ reading }) => reading.pulses);
  const { points, from } = breakdownsOf(pulses);
  const breakdown_V: (number | null)[] = pulses.map(() => null);
  for (const { x, value } of points) breakdown_V[x] = value;
  return {
    time_s: timesOf(captures),
    onset_s: pulses.map(onsetOf),
    breakdown_V,
    breakdownFrom: from,
    breakdownDrift: driftOf(points),
    breakdownChange: changeAlong(points),
    qChange: changeAlong(quietQ(pulses)),
    trends,
  };
}

/** The user's verdicts count here, so the change is looked for again and not taken from the judging. */
function changeAlong(points: { x: number; value: number }[]): CourseChange | null {
  const change = changePoint(points.map(({ value }) => value));
  return change && { number: points[change.index].x + 1, before: change.before, after: change.after };
}

function onsetOf(pulse: PulseReading): number | null {
  const { spark, switchOffTime_s } = pulse;
  if (verdictOf(pulse) !== "spark" || spark?.onset_s == null || switchOffTime_s === null) return null;
  return spark.onset_s - switchOffTime_s;
}

/**
 * One record is a clock of its own; several need each its time of day, as a table of segments gives it.
 * Past midnight the day goes on. Null where a record or a switch-off has no time.
 */
function timesOf(captures: CaptureDetail[]): number[] | null {
  const withPulses = captures.filter(({ reading }) => reading.pulses.length > 0);
  const times: number[] = [];
  let [days, before] = [0, -Infinity];
  for (const { reading } of withPulses) {
    const start = withPulses.length === 1 ? 0 : timeOfDay_s(reading.record.time);
    if (start === null) return null;
    // A second to spare: tables of segments round.
    if (start < before - 1) days++;
    before = start;
    for (const { switchOffTime_s } of reading.pulses) {
      if (switchOffTime_s === null) return null;
      times.push(days * day_s + start + switchOffTime_s);
    }
  }
  return times.length === 0 ? null : times.map((time) => time - times[0]);
}

/** "04-May 10:11:12.25" → 36672.25; null where no clock stands in the text. */
function timeOfDay_s(text: string | null): number | null {
  const clock = /(?<![\d:])(\d{1,2}):([0-5]\d):([0-5]\d(?:[.,]\d+)?)(?![\d:])/.exec(text ?? "");
  if (!clock) return null;
  return Number(clock[1]) * 3600 + Number(clock[2]) * 60 + Number(clock[3].replace(",", "."));
}
