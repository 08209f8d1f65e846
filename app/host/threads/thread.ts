import { Worker } from "node:worker_threads";
import { CallError, type Failure } from "../failure.ts";
import type { Answered, Asked, TaskName, Tasks } from "./tasks.ts";

/** The thread ended in the middle of a task; the next call starts a new one. */
export class ThreadEnded extends CallError {
  constructor(text: string) {
    super("worker-died", text);
  }
}

export interface Thread {
  ask<Name extends TaskName>(
    name: Name,
    argument: Tasks[Name]["argument"],
    onProgress?: (fraction: number) => void,
  ): Promise<Tasks[Name]["answer"]>;
  /** Ends the thread at once; tasks in hand are rejected with ThreadEnded. */
  stop(reason: string): Promise<void>;
}

interface Waiting {
  resolve(answer: never): void;
  reject(error: Error): void;
  onProgress?: (fraction: number) => void;
}

/** One worker thread, started when first asked and again after it died. */
export function createThread(workerUrl: URL): Thread {
  let worker: Worker | null = null;
  let lastNumber = 0;
  const waiting = new Map<number, Waiting>();

  function ended(which: Worker, reason: string) {
    if (worker !== which) return;
    worker = null;
    const failed = [...waiting.values()];
    waiting.clear();
    for (const { reject } of failed) reject(new ThreadEnded(reason));
  }

  function start(): Worker {
    const started = new Worker(workerUrl);
    started.on("message", (message: Answered) => settle(waiting, message));
    started.on("error", (error: Error) => ended(started, `the reading thread failed: ${error.message}`));
    started.on("exit", (code) => ended(started, `the reading thread ended with status ${code}`));
    return started;
  }

  return {
    ask(name, argument, onProgress) {
      worker ??= start();
      const number = ++lastNumber;
      return new Promise((resolve, reject) => {
        waiting.set(number, { resolve, reject, onProgress });
        // oxlint-disable-next-line unicorn/require-post-message-target-origin -- a thread's port has none
        worker?.postMessage({ number, name, argument } satisfies Asked);
      });
    },
    async stop(reason) {
      const stopped = worker;
      if (!stopped) return;
      ended(stopped, reason);
      await stopped.terminate();
    },
  };
}

function settle(waiting: Map<number, Waiting>, message: Answered) {
  const entry = waiting.get(message.number);
  if (!entry) return;
  if (message.kind === "progress") return entry.onProgress?.(message.fraction);
  waiting.delete(message.number);
  if (message.kind === "answer") entry.resolve(message.answer as never);
  else entry.reject(toError(message.failure));
}

const toError = (failure: Failure) => new CallError(failure.code, failure.text);
