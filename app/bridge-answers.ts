/** What the host answers: the types of the bridge's answers, SI throughout, null where there is no figure. */
import type { Note } from "../analysis/capture.ts";
import type {
  CaptureReading,
  Figure,
  Measured,
  RampReading,
  RateReading,
  RunCounts,
  Verdict,
} from "../analysis/reading-format.ts";
import type { Setup } from "../analysis/setup/schema.ts";
import type { Drift } from "../analysis/statistics/drift.ts";
import type { RunTrends } from "../analysis/spark/run-trends.ts";

export interface Page<Row> {
  rows: Row[];
  /** Hand it back for the next page; null at the end. */
  cursor: string | null;
}

export interface RunRow {
  run: number;
  name: string;
  coil: string | null;
  taken: string | null;
  captures: number;
  counts: RunCounts;
}

export interface CaptureRow {
  capture: number;
  file: string;
  record: { index: number; count: number };
  pulses: number;
  error: string | null;
}

/** What needs the user's eye first; `pulse` null where it is about the capture or the run. */
export interface Attention {
  kind:
    | "unclear"
    | "near-rating"
    | "over-rating"
    | "moved"
    | "poor-fit"
    | "setup-missing"
    | "question"
    | "error";
  text: string;
  /** Of the rating, where it is about one. */
  share?: number;
  capture: number | null;
  pulse: number | null;
}

/** Where a setup value came from. */
export type SetupOrigin = "stated" | "file setup" | "folder setup" | "answered before" | "guessed";

export interface RunDetail extends RunRow {
  setup: Setup;
  origins: Record<string, SetupOrigin>;
  captureRows: CaptureRow[];
  combined: { inductance_H: Figure; capacitance_F: Figure; resistance_ohm: Figure; q: Figure };
  notes: Note[];
  attention: Attention[];
  canUndo: boolean;
}

export interface PulseRow {
  capture: number;
  pulse: number;
  /** Counts the run's pulses from 1. */
  number: number;
  verdict: Verdict | null;
  ruled: Verdict | null;
  probability: number | null;
  peak_V: number | null;
  margin: number | null;
  q: Figure;
  frequency_Hz: Figure;
  onset_s: number | null;
  quality: "good" | "poor" | "refused" | null;
  /** Ring amplitude after switch-off against its first peak, 0…1, in 24 equal steps of the ring's window. */
  sketch: number[];
  /** Where in the sketch (0…1) the spark struck. */
  sketchOnset: number | null;
}

/** From pulse `number` on the level is another. */
export interface CourseChange {
  number: number;
  before: number;
  after: number;
}

/** What the run's chart and distributions are drawn from; lists in the order of the run's pulses. */
export interface RunCourse {
  /** Of each switch-off since the first, by the records' own clock; null where the files do not tell it. */
  time_s: number[] | null;
  /** Of the spark, after the switch-off. */
  onset_s: (number | null)[];
  /** From one source alone, `breakdownFrom`. */
  breakdown_V: (number | null)[];
  breakdownFrom: "secondary" | "ratio" | null;
  /** The line through the breakdowns; x counts the run's pulses from 0. */
  breakdownDrift: Drift | null;
  breakdownChange: CourseChange | null;
  qChange: CourseChange | null;
  /** Null in a run judged by a version that did not tell them. */
  trends: RunTrends | null;
}

export interface CaptureDetail {
  capture: number;
  run: number;
  file: string;
  sha256: string;
  /** Files read along with it: its settings, further channels of its shot. */
  companions: { name: string; sha256: string }[];
  setup: Setup;
  reading: CaptureReading;
}

/** Thinned for display: the lowest and highest sample of each of at most `pixels` slots. */
export interface TraceWindow {
  channel: number;
  name: string;
  unit: string;
  /** "samples" where the interval is unknown: times are then sample numbers, from 0. */
  axis: "seconds" | "samples";
  from_s: number;
  to_s: number;
  time_s: number[];
  low: (number | null)[];
  high: (number | null)[];
}

/** How a capture's file would be read with a changed setup; nothing of it is kept. */
export interface TriedSetup {
  records: number;
  /** Of the first record, as the rest. */
  samples: number;
  step_s: number | null;
  switchOffs: number;
  /** Of its first good ring. */
  frequency_Hz: Figure;
  inductance_H: Figure;
  /** The channel that rings, else the first. */
  trace: TraceWindow;
}

export interface RingPicture {
  /** The fitted ring over its window, and its continuation after the window as `expected`. */
  fitted: { time_s: number[]; value: number[] };
  expected: { time_s: number[]; value: number[] };
  residuals: { time_s: number[]; low: (number | null)[]; high: (number | null)[] };
  /** Peaks of |y − offset| and the fitted envelope, for a logarithmic scale. */
  peaks: { time_s: number[]; value: number[] };
  envelope: { time_s: number[]; value: number[] };
  offset: number | null;
}

export interface WatchState {
  path: string;
  run: number | null;
  captures: number;
  /** ISO time and text of what was last read or went wrong. */
  last: { at: string; text: string } | null;
}

export interface CoilRow {
  coil: string;
  runs: number;
  pulses: number;
  first: string | null;
  last: string | null;
  inductance_H: Figure;
}

export interface CoilHistoryRow {
  run: number;
  name: string;
  taken: string | null;
  inductance_H: Figure;
  capacitance_F: Figure;
  resistance_ohm: Figure;
  q: Figure;
  /** Of the winding, from the ramp. */
  resistance20_ohm: Figure;
  /** Null where no spark is expected. */
  misfireRate: RateReading | null;
  peak_V: number | null;
  /** In plain words, where this run departs from the others. */
  flag: string | null;
}

export interface CoilCurve {
  x: number[];
  y: number[];
  u: (number | null)[];
}

/** One part's load against what it is stated to bear; `share` = value/rating. */
export interface Stress {
  part: string;
  quantity: string;
  unit: string;
  value: Figure;
  rating: number | null;
  share: number | null;
  reason: string | null;
}

/** A coil over all its runs; a block that could not be had is null with its reason in the notes. */
export interface CoilSheet {
  coil: string;
  history: CoilHistoryRow[];
  notes: Note[];
  addedCapacitor: {
    points: {
      run: number;
      file: string;
      capacitance_F: number;
      /** 1/ω0². */
      inverseSquare_s2: Measured;
      residual: number;
      flagged: boolean;
    }[];
    inductance_H: Figure;
    selfCapacitance_F: Figure;
    seriesResistance_ohm: Figure;
    parallelResistance_ohm: Figure;
    reason: string | null;
  } | null;
  ramp: RampReading | null;
  /** Incremental inductance against current, where saturation was measured. */
  saturation: CoilCurve | null;
  dwell: {
    current_A: number;
    supplies_V: number[];
    temperatures_C: number[];
    /** Time to the current, a row for each supply, a column for each temperature; null: never reached. */
    time_s: Figure[][];
  } | null;
  stress: Stress[];
  /** What the choice of a capacitor starts from. */
  drive: {
    inductance_H: Figure;
    capacitance_F: Figure;
    current_A: Figure;
    supply_V: number | null;
    rating_V: number | null;
    smallest_F: Figure;
    reason: string | null;
  };
}

export interface CapacitorOption {
  capacitance_F: number;
  peak_V: Figure;
  frequency_Hz: Figure;
  margin: number | null;
}

export interface JobState {
  job: string;
  what: string;
  done: number;
  total: number;
  secondsLeft: number | null;
  state: "working" | "done" | "cancelled" | "failed";
  run: number | null;
  /** Files that could not be read: what, where and what to do. */
  problems: { file: string; code: string; text: string }[];
}
