import type { CaptureReading } from "../../../analysis/reading-format.ts";
import type { Setup } from "../../../analysis/setup/schema.ts";
import type { RingPicture, TraceWindow, TriedSetup } from "../../bridge.ts";
import type { Companion } from "../reading/index.ts";
import type { Failure } from "../failure.ts";
import type { RunReading } from "../../../analysis/run.ts";
import type { Sketch } from "../view/sketch.ts";

/** A capture file with the setup it is read with. */
export interface FileToRead {
  path: string;
  setup: Setup;
  /** Where it is read from, its own place gone. */
  copy?: string;
}

/** What a thread is asked and answers; plain data only, no samples of a capture among it. */
export interface Tasks {
  /** Reads a file and keeps its evidence in the thread. */
  read: {
    argument: FileToRead;
    /** `asked`: setup keys that answer what the file left open. */
    answer: {
      sha256: string;
      bytes: number;
      records: number;
      layout: string;
      asked: string[];
      companions: Companion[];
    };
  };
  /** Judges files of one run together; those whose evidence the thread no longer has are named instead. */
  judge: {
    argument: { files: FileToRead[]; setup: Setup };
    answer: { missing: string[] } | { files: JudgedFile[]; run: RunReading };
  };
  trace: {
    argument: {
      file: FileToRead;
      record: number;
      channel: number;
      from_s: number | null;
      to_s: number | null;
      pixels: number;
    };
    answer: TraceWindow;
  };
  ringPicture: {
    argument: { file: FileToRead; record: number; reading: CaptureReading; pulse: number; pixels: number };
    answer: RingPicture | null;
  };
  trySetup: { argument: { file: FileToRead; channel: string | null; pixels: number }; answer: TriedSetup };
}
export type TaskName = keyof Tasks;

export interface JudgedFile {
  path: string;
  sha256: string;
  bytes: number;
  layout: string;
  companions: Companion[];
  /** One a record, in the file's order. */
  readings: CaptureReading[];
  /** Per record, per pulse. */
  sketches: (Sketch | null)[][];
}

export interface Asked {
  number: number;
  name: TaskName;
  argument: Tasks[TaskName]["argument"];
}

export type Answered =
  | { number: number; kind: "progress"; fraction: number }
  | { number: number; kind: "answer"; answer: Tasks[TaskName]["answer"] }
  | { number: number; kind: "failure"; failure: Failure };
