/** Worker threads that parse pieces of one file side by side, where the entry has told their script. */
import { availableParallelism } from "node:os";
import { Worker } from "node:worker_threads";
import type { ParseResult, ParseTask } from "./parse-worker.ts";
import {
  PieceMemory,
  type BulkPlan,
  type ChunkParser,
  type ParsedChunk,
} from "../../../analysis/ingest/index.ts";

let script: URL | null = null;

/** The built worker's address; without it (plain TypeScript, tests) pieces are parsed where they are read. */
export function useParseWorker(url: URL): void {
  script = url;
}

/** Below this many bytes starting threads costs more than they save. */
const worthThreads = 8 * 1024 * 1024;
const mostThreads = 8;

export interface ParserPool extends ChunkParser {
  close(): Promise<void>;
}

export function openParser(bytes: number): ParserPool | undefined {
  if (script === null || bytes < worthThreads) return undefined;
  const threads = Math.min(mostThreads, availableParallelism());
  return new Pool(Array.from({ length: threads }, () => new Worker(script as URL)));
}

interface Waiting {
  resolve: (chunk: ParsedChunk) => void;
  reject: (error: Error) => void;
}

class Pool implements ParserPool {
  readonly lanes: number;
  private next = 0;
  private readonly memory = new PieceMemory(SharedArrayBuffer);
  private readonly waiting = new Map<number, Waiting>();

  constructor(private readonly workers: Worker[]) {
    this.lanes = workers.length + 1;
    for (const worker of workers) {
      worker.on("message", ({ id, chunk }: ParseResult) => {
        this.waiting.get(id)?.resolve(chunk);
        this.waiting.delete(id);
      });
      worker.on("error", (error) => this.fail(error));
    }
  }

  room(bytes: number): ArrayBufferLike {
    return this.memory.text(bytes);
  }

  parse(text: Uint8Array, plan: BulkPlan): Promise<ParsedChunk> {
    const id = this.next++;
    const result = new Promise<ParsedChunk>((resolve, reject) => this.waiting.set(id, { resolve, reject }));
    // Who stops early leaves results behind that nobody awaits.
    result.catch(() => undefined);
    const task: ParseTask = { id, text, plan, values: this.memory.values(text.length, plan) };
    this.workers[id % this.workers.length].postMessage(task);
    return result;
  }

  release(text: Uint8Array, chunk: ParsedChunk): void {
    this.memory.releaseText(text);
    this.memory.releaseValues(chunk);
  }

  async close(): Promise<void> {
    this.fail(new Error("the parser was closed"));
    this.memory.clear();
    await Promise.all(this.workers.splice(0).map((worker) => worker.terminate()));
  }

  private fail(error: Error): void {
    for (const { reject } of this.waiting.values()) reject(error);
    this.waiting.clear();
  }
}
