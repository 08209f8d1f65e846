/** Parses pieces of a file in a thread of its own; arrays go back without a copy. */
import { parentPort } from "node:worker_threads";
import { parseBulk, type BulkPlan } from "../../../analysis/ingest/index.ts";

export interface ParseTask {
  id: number;
  bytes: Uint8Array<ArrayBuffer>;
  plan: BulkPlan;
}

parentPort?.on("message", ({ id, bytes, plan }: ParseTask) => {
  const chunk = parseBulk(bytes, plan);
  parentPort?.postMessage(
    { id, chunk },
    chunk.values.map(({ buffer }) => buffer),
  );
});
