import { expect, it } from "vitest";
import { commands, type Bench, type BenchEvent, type JobState } from "../../app/bridge.ts";
import { samples } from "../cli/ringbook.ts";
import { join } from "node:path";

/** What every door must do alike; `bench` is the door's client side. */
export function keepsTheContract(bench: () => Bench): void {
  const heard: BenchEvent[] = [];

  const finished = async (job: string): Promise<JobState> => {
    for (;;) {
      const state = (await bench().call("jobs", {})).find((other) => other.job === job);
      if (state && state.state !== "working") return state;
      await new Promise((later) => setTimeout(later, 50));
    }
  };

  it("greets with version, book and the number of runs", async () => {
    bench().subscribe((event) => heard.push(event));
    expect(await bench().call("hello", {})).toMatchObject({ runs: 0, book: { readOnly: false } });
  });

  it("reads captures as a job with progress and tells of it", async () => {
    const sources = ["pulse-01.csv", "pulse-03.csv", "nowhere.csv"].map((name) => ({
      path: join(samples, name),
    }));
    const { job } = await bench().call("open", { sources });
    const state = await finished(job);
    expect(state).toMatchObject({ state: "done", run: 1, done: 2, total: 2 });
    expect(state.problems).toMatchObject([{ file: join(samples, "nowhere.csv"), code: "enoent" }]);
    await expect.poll(() => heard.map(({ type }) => type)).toContain("run-changed");
    expect(heard.some((event) => event.type === "job" && event.job.job === job)).toBe(true);
  });

  it("takes the bytes of a file that a page was given", async () => {
    const bytes = new TextEncoder().encode("Time (s),A (V)\n0,1\n1e-6,2\n2e-6,1\n3e-6,2\n4e-6,1\n5e-6,2\n");
    const { file } = await bench().call("addFile", { name: "dropped/a.csv", bytes });
    const { job } = await bench().call("open", { sources: [{ file }], run: "dropped" });
    expect((await finished(job)).state).toBe("done");
    expect((await bench().call("runs", { search: "dropped" })).rows).toHaveLength(1);
  });

  it("answers run, pulses, capture, trace, ring and the head of the file", async () => {
    const run = await bench().call("run", { run: 1 });
    expect(run.captureRows.filter(({ error }) => error === null)).toHaveLength(2);
    const { rows } = await bench().call("pulses", { run: 1 });
    expect(rows.map(({ number }) => number)).toEqual([1, 2]);
    const { capture, pulse } = rows[1];
    const { reading } = await bench().call("capture", { capture });
    expect(reading.pulses).toHaveLength(1);
    const trace = await bench().call("trace", { capture, channel: 0, from_s: null, to_s: null, pixels: 100 });
    expect(trace.time_s).toHaveLength(100);
    expect(Math.max(...trace.high.map((value) => value ?? 0))).toBe(reading.channels[0].maximum);
    const picture = await bench().call("ringPicture", { capture, pulse, pixels: 200 });
    expect(picture?.fitted.time_s.length).toBeGreaterThan(20);
    expect((await bench().call("fileHead", { capture, lines: 3 })).lines).toHaveLength(3);
    const { quietRate } = await bench().call("compare", { first: 1, second: 1 });
    expect(quietRate === null || (quietRate.value === 0 && quietRate.low < 0 && quietRate.high > 0)).toBe(
      true,
    );
    const course = await bench().call("course", { run: 1 });
    expect(course.onset_s.map((onset) => onset === null)).toEqual(rows.map((row) => row.verdict !== "spark"));
    // Two captures without a clock in their files: no common time.
    expect(course.time_s).toBeNull();
  });

  it("tries a changed setup on a capture's file and keeps nothing of it", async () => {
    const [{ capture }] = (await bench().call("pulses", { run: 1 })).rows;
    const before = await bench().call("capture", { capture });
    const asked = { capture, change: { channels: [{ position: 0, scale: 10 }] }, pixels: 100 };
    const tried = await bench().call("trySetup", asked);
    expect(Math.max(...tried.trace.high.map((value) => value ?? 0))).toBeCloseTo(
      10 * before.reading.channels[0].maximum!,
    );
    expect(tried).toMatchObject({ records: 1, switchOffs: 1, samples: before.reading.timebase.samples });
    expect(await bench().call("capture", { capture })).toEqual(before);
  });

  it("keeps the user's verdict, takes it back, and computes a run again after a change of the setup", async () => {
    const [{ capture, pulse }] = (await bench().call("pulses", { run: 1 })).rows;
    const { ruled } = await bench().call("rule", { capture, pulse, verdict: "unclear", remark: "hiss" });
    expect(ruled).toMatchObject({ verdict: "unclear", remark: "hiss" });
    expect((await bench().call("run", { run: 1 })).counts.unclear).toBe(1);
    expect(await bench().call("undo", { run: 1 })).toMatchObject({ job: null });
    const { job } = await bench().call("changeSetup", { run: 1, change: { capacitor_F: 6.6e-7 } });
    expect((await finished(job)).state).toBe("done");
    const run = await bench().call("run", { run: 1 });
    expect(run.setup.capacitor_F).toBe(6.6e-7);
    expect(run.origins.capacitor_F).toBe("stated");
  });

  it("answers coils, a coil's sheet and what other capacitors would do", async () => {
    const [{ coil }] = await bench().call("coils", {});
    expect((await bench().call("coil", { coil })).history).toHaveLength(1);
    const options = await bench().call("capacitorChoice", {
      coil,
      capacitances_F: [1e-7, 1e-6],
      current_A: 2,
    });
    expect(options[0].frequency_Hz?.value).toBeGreaterThan(options[1].frequency_Hz?.value ?? Infinity);
  });

  it("hands a run over and keeps preferences", async () => {
    for (const kind of ["csv", "jsonl", "html"] as const)
      expect((await bench().call("exportRun", { run: 1, kind })).text.length).toBeGreaterThan(500);
    await bench().call("setPreference", { key: "sheet", value: "dark" });
    expect(await bench().call("preferences", {})).toMatchObject({ sheet: "dark" });
  });

  it.each(Object.keys(commands))("refuses %s with what is no argument of it", async (name) => {
    for (const argument of [null, "text", 7, [], { surplus: 1 }])
      await expect(bench().call(name as never, argument as never)).rejects.toThrow(/wrong argument/);
  });

  it.each([
    ["addFile", { name: "a.csv", bytes: "text" }],
    ["open", { sources: [] }],
    ["open", { sources: [{ path: 5 }] }],
    ["cancel", {}],
    ["runs", { limit: 1e9 }],
    ["run", { run: "1" }],
    ["pulses", { run: 0 }],
    ["capture", { capture: 1.5 }],
    ["trace", { capture: 1, channel: 0, from_s: "a", to_s: null, pixels: 100 }],
    ["ringPicture", { capture: 1, pulse: -1, pixels: 10 }],
    ["changeSetup", { run: 1, change: { capacitor_F: "big" } }],
    ["changeSetup", { run: 1, change: { nonsense: 1 } }],
    ["trySetup", { capture: 1, change: { nonsense: 1 }, pixels: 100 }],
    ["trySetup", { capture: 1, change: {}, pixels: 0 }],
    ["course", { run: 999 }],
    ["compare", { first: 1, second: 999 }],
    ["rule", { capture: 1, pulse: 0, verdict: "maybe", remark: "" }],
    ["exportRun", { run: 1, kind: "exe" }],
    ["fileHead", { capture: 1, lines: 1e6 }],
    ["watch", { path: 1 }],
    ["coil", {}],
    ["capacitorChoice", { coil: "a", capacitances_F: [-1], current_A: null }],
    ["setPreference", { key: "a" }],
    ["run", { run: 999 }],
    ["frobnicate", {}],
  ])("refuses %s with a wrong argument (%j) by an error for people", async (name, argument) => {
    const refused = bench().call(name as never, argument as never);
    await expect(refused).rejects.toThrow(/\w{3,} \w+/);
  });
}
