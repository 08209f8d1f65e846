import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { readRun, type JudgedSource, type RunKeeper } from "../../app/host/jobs/read-run.ts";
import { createThread, type Thread } from "../../app/host/threads/thread.ts";

const workerUrl = new URL("./mortal-worker.mjs", import.meta.url);
let thread: Thread;
beforeEach(() => (thread = createThread(workerUrl)));
afterEach(() => thread.stop("the test is over"));

const source = (path: string) => ({ path, setup: {}, origins: {} });
const read = (path: string, onProgress?: (fraction: number) => void) =>
  thread.ask("read", { path, setup: {} }, onProgress);

describe("a reading thread", () => {
  it("answers, and tells how far it is", async () => {
    const fractions: number[] = [];
    expect(await read("a.csv", (fraction) => fractions.push(fraction))).toMatchObject({ bytes: 1 });
    expect(fractions).toEqual([0.5]);
  });

  it("that ends in a task refuses it, and is there again for the next", async () => {
    await expect(read("deadly.csv")).rejects.toThrow(/ended with status 7/);
    expect(await read("a.csv")).toMatchObject({ bytes: 1 });
  });

  it("that fails in a task says of what", async () => {
    await expect(read("throws.csv")).rejects.toMatchObject({
      code: "worker-died",
      message: /no memory left/,
    });
    expect(await read("a.csv")).toMatchObject({ bytes: 1 });
  });

  it("is stopped whatever it is at, and its task refused with the reason", async () => {
    await read("a.csv");
    const endless = read("endless.csv");
    await Promise.all([thread.stop("cancelled"), expect(endless).rejects.toThrow("cancelled")]);
    expect(await read("a.csv")).toMatchObject({ bytes: 1 });
  });
});

function keeping() {
  const kept: string[][] = [];
  const problems: Record<string, unknown> = {};
  const keeper: RunKeeper = {
    remembered: () => [],
    copy: async () => {},
    keep: (files: JudgedSource[]) => kept.push(files.map(({ path }) => path)),
    problem: (file, error) => (problems[file.path] = (error as { code: string }).code),
  };
  return { keeper, kept, problems };
}
const uncancelled = { cancelled: false, progress: () => {} };

describe("a run whose thread dies of one of its files", () => {
  it("has that file marked and all others judged, those read before its death again", async () => {
    const { keeper, kept, problems } = keeping();
    await readRun(thread, keeper, uncancelled, [], ["a.csv", "deadly.csv", "b.csv"].map(source));
    expect(problems).toEqual({ "deadly.csv": "worker-died" });
    expect(kept).toEqual([["a.csv", "b.csv"]]);
  });

  it("marks it also when it was read well before and now kills the thread", async () => {
    const { keeper, kept, problems } = keeping();
    await readRun(thread, keeper, uncancelled, [source("deadly.csv"), source("a.csv")], [source("b.csv")]);
    expect(problems).toEqual({ "deadly.csv": "worker-died" });
    expect(kept).toEqual([["a.csv", "b.csv"]]);
  });
});

describe("a run that grows", () => {
  it("is judged with what it held already, each file once", async () => {
    const { keeper, kept } = keeping();
    await readRun(
      thread,
      keeper,
      uncancelled,
      ["a.csv", "b.csv"].map(source),
      ["b.csv", "c.csv"].map(source),
    );
    expect(kept).toEqual([["a.csv", "b.csv", "c.csv"]]);
  });

  it("keeps nothing more once it is cancelled", async () => {
    const { keeper, kept } = keeping();
    const progress = { cancelled: false, progress: (done: number) => (progress.cancelled = done >= 1) };
    await readRun(thread, keeper, progress, [], ["a.csv", "b.csv"].map(source));
    expect(kept).toEqual([]);
  });
});
