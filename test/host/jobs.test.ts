import { describe, expect, it, vi } from "vitest";
import type { BenchEvent, JobState } from "../../app/bridge.ts";
import { CallError } from "../../app/host/failure.ts";
import { createJobs } from "../../app/host/jobs/jobs.ts";

function setUp() {
  const told: JobState[] = [];
  let time = 0;
  const jobs = createJobs(
    (event: BenchEvent) => event.type === "job" && told.push(event.job),
    () => time,
  );
  return { jobs, told, wait: (ms: number) => (time += ms) };
}

describe("jobs", () => {
  it("run one after the other, in order", async () => {
    const { jobs } = setUp();
    const order: string[] = [];
    jobs.start("first", async () => {
      await new Promise((resolve) => setTimeout(resolve, 20));
      order.push("first");
    });
    jobs.start("second", async () => void order.push("second"));
    await jobs.idle();
    expect(order).toEqual(["first", "second"]);
  });

  it("are told while they work in silence, at least five times a second", async () => {
    vi.useFakeTimers();
    try {
      const told: JobState[] = [];
      const jobs = createJobs((event) => event.type === "job" && told.push(event.job));
      const { finished } = jobs.start("judging", () => new Promise((resolve) => setTimeout(resolve, 10_000)));
      await vi.advanceTimersByTimeAsync(10_000);
      expect((await finished).state).toBe("done");
      expect(told.filter(({ state }) => state === "working").length).toBeGreaterThanOrEqual(50);
    } finally {
      vi.useRealTimers();
    }
  });

  it("tell how far they are and how long they will take, at most ten times a second", async () => {
    const { jobs, told, wait } = setUp();
    const { finished } = jobs.start("reading", async (job) => {
      job.total(100);
      for (let done = 1; done <= 100; done++) {
        wait(50);
        job.progress(done);
      }
    });
    expect((await finished).state).toBe("done");
    const halfway = told.find(({ done }) => done === 50);
    expect(halfway).toMatchObject({ total: 100, state: "working", secondsLeft: 2.5 });
    expect(told.length).toBeLessThan(55);
    expect(told.at(-1)).toMatchObject({ state: "done", secondsLeft: null });
  });

  it("stop at once when cancelled, and the next one still runs", async () => {
    const { jobs } = setUp();
    const { job, finished } = jobs.start("long", async (handle) => {
      await new Promise<void>((_resolve, reject) => handle.onCancel(() => reject(new Error("stopped"))));
    });
    const next = jobs.start("next", async () => {});
    await Promise.resolve();
    expect(jobs.cancel(job)).toBe(true);
    expect(await finished).toMatchObject({ state: "cancelled", problems: [] });
    expect((await next.finished).state).toBe("done");
    expect(jobs.cancel(job)).toBe(false);
  });

  it("never begin when cancelled while they wait", async () => {
    const { jobs } = setUp();
    let begun = false;
    jobs.start("first", async () => {});
    const { job, finished } = jobs.start("second", async () => void (begun = true));
    jobs.cancel(job);
    expect([(await finished).state, begun]).toEqual(["cancelled", false]);
  });

  it("that fail say why, and files that could not be read are listed", async () => {
    const { jobs } = setUp();
    const { finished } = jobs.start("reading", async (job) => {
      job.problem("a.csv", new CallError("empty-file", "the file is empty"));
      throw new CallError("enospc", "the disk is full");
    });
    expect(await finished).toMatchObject({
      state: "failed",
      problems: [
        { file: "a.csv", code: "empty-file", text: "the file is empty" },
        { file: "", code: "enospc", text: "the disk is full" },
      ],
    });
  });

  it("that nobody knows can't be cancelled", () => {
    expect(() => setUp().jobs.cancel("job-9")).toThrow("there is no job job-9");
  });
});
