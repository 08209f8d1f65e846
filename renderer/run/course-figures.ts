/** The figures a run's chart can show, each pulse's from its row or from the run's course. */
import type { CourseChange, PulseRow, RunCourse } from "../../app/bridge.ts";

interface ChartFigure {
  words: string;
  unit: string;
  of(row: PulseRow, at: number, course: RunCourse | null): number | null;
  change?(course: RunCourse): CourseChange | null;
  /** A line that the figure follows along the run, over the pulse number. */
  drift?(course: RunCourse): ((number: number) => number) | null;
}

export const chartFigures = {
  kick: { words: "kick", unit: "V", of: (row) => row.peak_V },
  frequency: { words: "ring frequency", unit: "Hz", of: (row) => row.frequency_Hz?.value ?? null },
  q: { words: "Q", unit: "", of: (row) => row.q?.value ?? null, change: (course) => course.qChange },
  onset: { words: "spark’s onset", unit: "s", of: (_, at, course) => course?.onset_s[at] ?? null },
  breakdown: {
    words: "breakdown voltage",
    unit: "V",
    of: (_, at, course) => course?.breakdown_V[at] ?? null,
    change: (course) => course.breakdownChange,
    drift: driftLine,
  },
  probability: { words: "probability of a spark", unit: "", of: (row) => row.probability },
} satisfies Record<string, ChartFigure>;
export type FigureName = keyof typeof chartFigures;

export interface Moves {
  change: CourseChange | null;
  drift: ((number: number) => number) | null;
}

export function valuesAlong(name: FigureName, rows: PulseRow[], course: RunCourse | null) {
  const { of }: ChartFigure = chartFigures[name];
  return rows.map((row, at) => of(row, at, course));
}

export function movesAlong(name: FigureName, course: RunCourse | null): Moves {
  const { change, drift }: ChartFigure = chartFigures[name];
  return { change: (course && change?.(course)) ?? null, drift: (course && drift?.(course)) ?? null };
}

/** Through the middle of the breakdowns; only where it leads up or down beyond doubt. */
function driftLine({ breakdownDrift, breakdown_V }: RunCourse): ((number: number) => number) | null {
  if (!breakdownDrift?.drifts) return null;
  const broke = breakdown_V.flatMap((value, at) => (value === null ? [] : [at + 1]));
  const middle = broke.reduce((sum, number) => sum + number, 0) / broke.length;
  const { slope, level } = breakdownDrift;
  return (number) => level.value + slope.value * (number - middle);
}
