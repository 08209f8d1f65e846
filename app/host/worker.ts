/** The thread in which captures are read, judged and looked at, so that no door ever waits for them. */
import { parentPort } from "node:worker_threads";
import { describeFailure } from "./failure.ts";
import { useParseWorker } from "./reading/index.ts";
import { createReader } from "./threads/reader.ts";
import type { Answered, Asked, TaskName, Tasks } from "./threads/tasks.ts";
import { createViewer } from "./threads/viewer.ts";

// Built, the parse threads' script is this one's neighbour; plain TypeScript can't be started as a thread.
if (import.meta.url.endsWith(".js")) useParseWorker(new URL("./parse-worker.js", import.meta.url));

type TaskHandlers = {
  [Name in TaskName]: (
    argument: Tasks[Name]["argument"],
    onProgress: (fraction: number) => void,
  ) => Promise<Tasks[Name]["answer"]> | Tasks[Name]["answer"];
};

const handlers: TaskHandlers = { ...createReader(), ...createViewer() };

// oxlint-disable-next-line unicorn/require-post-message-target-origin -- a thread's port has none
const send = (message: Answered) => parentPort?.postMessage(message);

parentPort?.on("message", async ({ number, name, argument }: Asked) => {
  const onProgress = (fraction: number) => send({ number, kind: "progress", fraction });
  try {
    const handler = handlers[name] as (argument: unknown, onProgress: (fraction: number) => void) => unknown;
    send({ number, kind: "answer", answer: (await handler(argument, onProgress)) as never });
  } catch (error) {
    send({ number, kind: "failure", failure: describeFailure(error) });
  }
});
