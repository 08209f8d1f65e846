import type { CaptureEvidence } from "../../../analysis/evidence.ts";
import { readCapture } from "../../../analysis/reading.ts";
import { judgeRun } from "../../../analysis/run.ts";
import { readFile, type Companion } from "../reading/index.ts";
import { sketchPulses } from "../view/sketch.ts";
import type { FileToRead, JudgedFile, Tasks } from "./tasks.ts";

interface Kept {
  sha256: string;
  bytes: number;
  layout: string;
  companions: Companion[];
  evidence: CaptureEvidence[];
  /** Drawn when the file was first judged, while its samples were at hand. */
  sketches: JudgedFile["sketches"] | null;
}

/** Reads files into evidence and judges the evidence of a run, which stays here while the run is live. */
export function createReader() {
  const kept = new Map<string, Kept>();

  return {
    async read(file: FileToRead, onProgress: (fraction: number) => void) {
      const { sha256, bytes, layout, captures, companions } = await readFile(
        file.copy ?? file.path,
        file.setup,
        { onProgress },
      );
      const evidence = captures.map((capture) => readCapture(capture, file.setup));
      kept.set(keyOf(file), { sha256, bytes, layout, companions, evidence, sketches: null });
      const notes = captures.flatMap((capture) => capture.notes);
      const asked = [
        ...new Set(notes.flatMap(({ question, answers }) => (question && answers ? [answers] : []))),
      ];
      return { sha256, bytes, records: captures.length, layout, asked, companions };
    },

    judge({ files, setup }: Tasks["judge"]["argument"]): Tasks["judge"]["answer"] {
      const missing = files.filter((file) => !kept.has(keyOf(file))).map(({ path }) => path);
      if (missing.length > 0) return { missing };
      const held = files.map((file) => kept.get(keyOf(file)) as Kept);
      const all = held.flatMap(({ evidence }) => evidence);
      const { readings, run } = judgeRun(all, setup);
      let end = 0;
      const judged = held.map((file, i): JudgedFile => {
        const { evidence, sketches: _, ...read } = file;
        const of = readings.slice(end, (end += evidence.length));
        file.sketches ??= sketchPulses(evidence, readings);
        return { path: files[i].path, ...read, readings: of, sketches: file.sketches };
      });
      forgetSamples(all);
      return { files: judged, run };
    },
  };
}

/**
 * Judging holds each pulse's own window from its first time on; the records themselves would fill the
 * memory in a run of many files.
 */
function forgetSamples(evidence: CaptureEvidence[]): void {
  for (const capture of evidence)
    capture.channels = capture.channels.map((channel) => ({ ...channel, samples: new Float64Array(0) }));
}

const keyOf = ({ path, setup }: FileToRead) => JSON.stringify([path, setup]);
