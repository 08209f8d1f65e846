/**
 * The contract between window and host, served alike over IPC (desktop) and HTTP/WebSocket (local).
 * One map of commands: each names the schema its argument must pass at the door and the type of its
 * answer. Raw samples never cross it; times are seconds on the record's own axis; figures are SI.
 */
import * as v from "valibot";
import { setupSchema } from "../analysis/setup/schema.ts";
import type { RunComparison } from "../analysis/coil/compare.ts";
import type { Verdict } from "../analysis/reading-format.ts";
import type {
  CapacitorOption,
  CaptureDetail,
  CoilRow,
  CoilSheet,
  JobState,
  Page,
  PulseRow,
  RingPicture,
  RunCourse,
  RunDetail,
  RunRow,
  TraceWindow,
  TriedSetup,
  WatchState,
} from "./bridge-answers.ts";

export type * from "./bridge-answers.ts";

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
  /** When and at what voltage the run's pulses sparked, over their number and over time. */
  course: v.strictObject({ run: id }),
  /** The second run less the first. */
  compare: v.strictObject({ first: id, second: id }),
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
  /** How a capture's file would be read with this change of its setup: a question's choices side by side. */
  trySetup: v.strictObject({
    capture: id,
    change: v.record(v.string(), v.unknown()),
    channel: v.optional(v.nullable(shortText)),
    pixels: count(8000),
  }),
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
  course: RunCourse;
  compare: RunComparison;
  capture: CaptureDetail;
  trace: TraceWindow;
  ringPicture: RingPicture | null;
  changeSetup: { job: string };
  trySetup: TriedSetup;
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
