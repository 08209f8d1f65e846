import type { CaptureEvidence } from "../../../analysis/evidence.ts";
import { readCapture } from "../../../analysis/reading.ts";
import { judgeRun } from "../../../analysis/run.ts";
import { readFile } from "../reading/index.ts";
import { sketchRun } from "../view/sketch.ts";
import type { FileToRead, Tasks } from "./tasks.ts";

interface Kept {
  sha256: string;
  bytes: number;
  evidence: CaptureEvidence[];
}

/** Files whose evidence stays at hand; a run of more is read again when it is judged again. */
const mostKept = 5000;

/** Reads files into evidence and judges the evidence of a run, which stays here while the run is live. */
export function createReader() {
  const kept = new Map<string, Kept>();

  return {
    async read(file: FileToRead, onProgress: (fraction: number) => void) {
      const { sha256, bytes, captures } = await readFile(file.path, file.setup, { onProgress });
      const evidence = captures.map((capture) => readCapture(capture, file.setup));
      kept.set(keyOf(file), { sha256, bytes, evidence });
      for (const oldest of kept.keys()) {
        if (kept.size <= mostKept) break;
        kept.delete(oldest);
      }
      return { sha256, bytes, records: captures.length };
    },

    judge({ files, setup }: Tasks["judge"]["argument"]): Tasks["judge"]["answer"] {
      const missing = files.filter((file) => !kept.has(keyOf(file))).map(({ path }) => path);
      if (missing.length > 0) return { missing };
      const held = files.map((file) => kept.get(keyOf(file)) as Kept);
      const all = held.flatMap(({ evidence }) => evidence);
      const { readings, run } = judgeRun(all, setup);
      const sketches = sketchRun(all, readings);
      let end = 0;
      const judged = held.map(({ sha256, bytes, evidence }, i) => {
        const [from, to] = [end, (end += evidence.length)];
        const { path } = files[i];
        return {
          path,
          sha256,
          bytes,
          readings: readings.slice(from, to),
          sketches: sketches.slice(from, to),
        };
      });
      return { files: judged, run };
    },
  };
}

const keyOf = (file: FileToRead) => JSON.stringify([file.path, file.setup]);
