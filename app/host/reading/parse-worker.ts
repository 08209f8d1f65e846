/** Parses pieces of a file in a thread of its own; arrays go back without a copy. */
import { parentPort } from "node:worker_threads";
import { parseBulk, type BulkPlan, type ParsedChunk } from "../../../analysis/ingest/index.ts";

export interface ParseTask {
  id: number;
  bytes: Uint8Array<ArrayBuffer>;
  plan: BulkPlan;
  /** Memory for the values. */
  reuse: ArrayBuffer[];
}

export interface ParseResult {
  id: number;
  chunk: ParsedChunk;
  /** The task's memory, to be used again. */
  spare: ArrayBuffer;
}

parentPort?.on("message", ({ id, bytes, plan, reuse }: ParseTask) => {
  const chunk = parseBulk(bytes, plan, reuse);
  const result: ParseResult = { id, chunk, spare: bytes.buffer };
  parentPort?.postMessage(result, [bytes.buffer, ...chunk.values.map(({ buffer }) => buffer)]);
});
