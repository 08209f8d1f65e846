import { resolve } from "node:path";
import { SetupError } from "../../analysis/setup/parse.ts";
import { openBook } from "../host/book/index.ts";
import { captureLine } from "../host/capture-line.ts";
import { describeFailure } from "../host/failure.ts";
import type { JudgedSource } from "../host/jobs/read-run.ts";
import { readSources, type Readout } from "../host/jobs/read-sources.ts";
import { readSetupFile } from "../host/setups.ts";
import { createReader } from "../host/threads/reader.ts";
import { captureText } from "./capture-text.ts";
import { complain, readArguments, say, UsageError, withUsage } from "./usage.ts";

/** ringbook read PATH… [--setup FILE] [--json] [--book FILE] */
export const run = (args: string[]) =>
  withUsage(async () => {
    const { values, positionals } = readArguments(args, {
      setup: { type: "string" },
      json: { type: "boolean" },
      book: { type: "string" },
    });
    if (positionals.length === 0) throw new UsageError("read wants the path of a capture or of a folder");
    const setup = values.setup === undefined ? null : await statedSetup(values.setup);
    const book = values.book === undefined ? null : await openBook(values.book);
    const { readout, result } = collect();
    try {
      await readSources(inProcess(), book, readout, positionals, null, setup);
    } finally {
      book?.close();
    }
    clearProgress();
    for (const { file, text } of result.problems) complain(`${file}: ${text}`);
    const print = values.json ? printLines : printText;
    for (const file of result.inOrder()) print(file);
    return result.problems.length > 0 ? 1 : 0;
  });

async function statedSetup(path: string) {
  try {
    return await readSetupFile(path);
  } catch (error) {
    const { text } = describeFailure(error);
    throw new UsageError(error instanceof SetupError ? text : `--setup: ${text}`);
  }
}

/** The terminal reads in its own process: nothing waits beside it. */
function inProcess() {
  const { read, judge } = createReader();
  return {
    ask: async (name: "read" | "judge", argument: never, onProgress: (fraction: number) => void = () => {}) =>
      (name === "read" ? await read(argument, onProgress) : judge(argument)) as never,
  };
}

function collect() {
  let order: string[] = [];
  const files = new Map<string, JudgedSource>();
  const problems: { file: string; text: string }[] = [];
  const readout: Readout = {
    cancelled: false,
    begin: (sources) => (order = sources.map(({ path }) => resolve(path))),
    progress: (done) => showProgress(done, order.length),
    problem: (file, error) => problems.push({ file, text: describeFailure(error).text }),
    kept(_run, judged) {
      for (const file of judged) files.set(resolve(file.path), file);
    },
  };
  const inOrder = () => order.flatMap((path) => files.get(path) ?? []);
  return { readout, result: { problems, inOrder } };
}

function printLines(file: JudgedSource) {
  for (const reading of file.readings) say(captureLine(file.path, file.sha256, file.setup, reading));
}

function printText(file: JudgedSource) {
  for (const reading of file.readings) say(captureText(file.path, reading, file.setup));
}

const showProgress = (done: number, total: number) => {
  if (process.stderr.isTTY) process.stderr.write(`\r${Math.floor(done)} of ${total} read`);
};
const clearProgress = () => {
  if (process.stderr.isTTY) process.stderr.write("\r\u001b[K");
};
