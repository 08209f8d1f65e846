/**
 * The contract between window and host, served alike over IPC (desktop) and HTTP/WebSocket (local).
 * One map of commands: each names the schema its argument must pass at the door and the type of its
 * answer. Raw samples never cross it; times are seconds on the record's own axis; figures are SI.
 */
import * as v from "valibot";
import { setupSchema, type Setup } from "../analysis/setup/schema.ts";
import type { Note } from "../analysis/capture.ts";
import type {
  CaptureReading,
  Figure,
  Measured,
  RampReading,
  RunCounts,
  Verdict,
} from "../analysis/reading-format.ts";

const id = v.pipe(v.number(), v.integer(), v.minValue(1));
const count = (most: number) => v.pipe(v.number(), v.integer(), v.minValue(1), v.maxValue(most));
const index = v.pipe(v.number(), v.integer(), v.minValue(0));
const shortText = v.pipe(v.string(), v.maxLength(500));
const longText = v.pipe(v.string(), v.maxLength(10_000));
const verdict = v.picklist(["spark", "no-spark", "unclear"]);
const page = { cursor: v.optional(v.nullable(shortText)), limit: v.optional(count(5000)) };

/** A file is named by its path (a door that sees the machine's files) or by what addFile answered. */
const source = v.union([v.strictObject({ path: longText }), v.strictObject({ file: shortText })]);

export const commands = {
  hello: v.strictObject({}),
  /** Bytes of a dropped file; the host keeps them in its own folder until they are read. */
  addFile: v.strictObject({ name: shortText, bytes: v.instance(Uint8Array) }),
  /** Read files or folders into the book; progress comes as events of the job. */
  open: v.strictObject({
    sources: v.pipe(v.array(source), v.minLength(1), v.maxLength(100_000)),
    run: v.optional(v.nullable(shortText)),
    setup: v.optional(v.nullable(setupSchema)),
  }),
  openDemo: v.strictObject({}),
  jobs: v.strictObject({}),
  cancel: v.strictObject({ job: shortText }),
  runs: v.strictObject({
    search: v.optional(v.nullable(shortText)),
    coil: v.optional(v.nullable(shortText)),
    from: v.optional(v.nullable(shortText)),
    to: v.optional(v.nullable(shortText)),
    verdict: v.optional(v.nullable(verdict)),
    ...page,
  }),
  run: v.strictObject({ run: id }),
  pulses: v.strictObject({ run: id, ...page }),
  capture: v.strictObject({ capture: id }),
  trace: v.strictObject({
    capture: id,
    channel: index,
    from_s: v.nullable(v.pipe(v.number(), v.finite())),
    to_s: v.nullable(v.pipe(v.number(), v.finite())),
    pixels: count(8000),
  }),
  ringPicture: v.strictObject({ capture: id, pulse: index, pixels: count(8000) }),
  changeSetup: v.strictObject({ run: id, change: v.record(v.string(), v.unknown()) }),
  undo: v.strictObject({ run: id }),
  rule: v.strictObject({ capture: id, pulse: index, verdict: v.nullable(verdict), remark: longText }),
  exportRun: v.strictObject({ run: id, kind: v.picklist(["csv", "jsonl", "html"]) }),
  /** First lines of a capture's file, to see what was read beside a question. */
  fileHead: v.strictObject({ capture: id, lines: count(200) }),
  /** Read a folder's captures as they are saved, until unwatched. */
  watch: v.strictObject({ path: longText }),
  unwatch: v.strictObject({ path: longText }),
  watching: v.strictObject({}),
  coils: v.strictObject({}),
  coil: v.strictObject({ coil: shortText }),
  /** What the coil would do with other capacitors, at one switch-off current. */
  capacitorChoice: v.strictObject({
    coil: shortText,
    capacitances_F: v.pipe(v.array(v.pipe(v.number(), v.minValue(1e-13), v.maxValue(0.1))), v.maxLength(500)),
    current_A: v.nullable(v.pipe(v.number(), v.finite())),
  }),
  preferences: v.strictObject({}),
  setPreference: v.strictObject({ key: shortText, value: longText }),
} as const;

export type CommandName = keyof typeof commands;
export type Argument<Name extends CommandName> = v.InferOutput<(typeof commands)[Name]>;

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
  kind: "unclear" | "near-rating" | "over-rating" | "poor-fit" | "setup-missing" | "question" | "error";
  text: string;
  capture: number | null;
  pulse: number | null;
}

/** Where a setup value came from. */
export type SetupOrigin = "stated" | "file setup" | "folder setup" | "guessed";

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

export interface CaptureDetail {
  capture: number;
  run: number;
  file: string;
  sha256: string;
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

export interface Answers {
  hello: {
    version: string;
    book: { path: string; readOnly: boolean; note: string | null };
    /** Whether paths of this machine can be opened (a desktop door), beside dropped files. */
    paths: boolean;
    runs: number;
  };
  addFile: { file: string };
  open: { job: string };
  openDemo: { job: string };
  jobs: JobState[];
  cancel: { cancelled: boolean };
  runs: Page<RunRow>;
  run: RunDetail;
  pulses: Page<PulseRow>;
  capture: CaptureDetail;
  trace: TraceWindow;
  ringPicture: RingPicture | null;
  changeSetup: { job: string };
  undo: { job: string | null; text: string };
  rule: { ruled: { verdict: Verdict; at: string; remark: string } | null };
  exportRun: { name: string; mime: string; text: string };
  fileHead: { lines: string[]; more: boolean };
  watch: WatchState;
  unwatch: { unwatched: boolean };
  watching: WatchState[];
  coils: CoilRow[];
  coil: CoilSheet;
  capacitorChoice: CapacitorOption[];
  preferences: Record<string, string>;
  setPreference: { kept: true };
}
export type Answer<Name extends CommandName> = Answers[Name];

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

export type BenchEvent =
  | { type: "job"; job: JobState }
  | { type: "run-changed"; run: number }
  | { type: "watch"; watch: WatchState }
  | { type: "book-changed" }
  /** The shell's menu asks the window to turn to a run. */
  | { type: "show-run"; run: number };

/** What a door offers its window. */
export interface Bench {
  call<Name extends CommandName>(name: Name, argument: Argument<Name>): Promise<Answer<Name>>;
  /** Answers a function that ends the subscription. */
  subscribe(listener: (event: BenchEvent) => void): () => void;
}
