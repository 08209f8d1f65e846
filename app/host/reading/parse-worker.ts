/** Parses pieces of a file in a thread of its own; text and values lie in shared memory. */
import { parentPort } from "node:worker_threads";
import { parseBulk, type BulkPlan, type ParsedChunk } from "../../../analysis/ingest/index.ts";

export interface ParseTask {
  id: number;
  text: Uint8Array;
  plan: BulkPlan;
  /** Memory for the values. */
  values: ArrayBufferLike[];
}

export interface ParseResult {
  id: number;
  chunk: ParsedChunk;
}

parentPort?.on("message", ({ id, text, plan, values }: ParseTask) => {
  // oxlint-disable-next-line unicorn/require-post-message-target-origin -- a thread's port has none
  parentPort?.postMessage({ id, chunk: parseBulk(text, plan, values) } satisfies ParseResult);
});
