import type { BenchEvent, JobState } from "../../bridge.ts";
import { CallError, describeFailure } from "../failure.ts";

/** What a job in hand may say and ask. */
export interface JobHandle {
  readonly cancelled: boolean;
  /** Called once when the user cancels, to end what is in hand at once. */
  onCancel(stop: () => void): void;
  total(total: number): void;
  /** `done` may have a fraction: a file in its middle. */
  progress(done: number): void;
  run(run: number): void;
  problem(file: string, error: unknown): void;
}

export interface Jobs {
  /** Starts `work` when the jobs before it are done; answers the job's name at once. */
  start(what: string, work: (job: JobHandle) => Promise<void>): { job: string; finished: Promise<JobState> };
  cancel(job: string): boolean;
  list(): JobState[];
  /** Settles when no job is in hand. */
  idle(): Promise<void>;
}

interface Entry {
  state: JobState;
  started: number;
  lastTold: number;
  cancelled: boolean;
  stop: (() => void) | null;
}

const mostRemembered = 50;
const eventsApart_ms = 100;
/** A job whose work says nothing for so long is told as it stands, with the time that is left by now. */
const silence_ms = 150;
const mostProblems = 1000;

/** One job after the other: they share the reading thread and the book. */
export function createJobs(emit: (event: BenchEvent) => void, now: () => number = Date.now): Jobs {
  const entries = new Map<string, Entry>();
  let queue: Promise<void> = Promise.resolve();
  let lastNumber = 0;

  function tell(entry: Entry) {
    entry.lastTold = now();
    entry.state.secondsLeft = secondsLeft(entry, now());
    emit({ type: "job", job: structuredClone(entry.state) });
  }

  async function perform(entry: Entry, work: (job: JobHandle) => Promise<void>) {
    if (!entry.cancelled) {
      entry.started = now();
      tell(entry);
      const beat = setInterval(() => {
        if (now() - entry.lastTold >= silence_ms) tell(entry);
      }, silence_ms / 3);
      try {
        await work(handleOf(entry, tell, now));
      } catch (error) {
        if (!entry.cancelled) {
          entry.state.problems.push({ file: "", ...describeFailure(error) });
          entry.state.state = "failed";
        }
      } finally {
        clearInterval(beat);
      }
    }
    if (entry.cancelled) entry.state.state = "cancelled";
    else if (entry.state.state === "working") entry.state.state = "done";
    tell(entry);
  }

  return {
    start(what, work) {
      const job = `job-${++lastNumber}`;
      const state: JobState = {
        job,
        what,
        done: 0,
        total: 0,
        secondsLeft: null,
        state: "working",
        run: null,
        problems: [],
      };
      const entry: Entry = { state, started: now(), lastTold: -Infinity, cancelled: false, stop: null };
      entries.set(job, entry);
      forgetOldest(entries);
      queue = queue.then(() => perform(entry, work));
      return { job, finished: queue.then(() => structuredClone(state)) };
    },
    cancel(job) {
      const entry = entries.get(job);
      if (!entry) throw new CallError("no-such-job", `there is no job ${job}`);
      if (entry.state.state !== "working") return false;
      entry.cancelled = true;
      entry.stop?.();
      return true;
    },
    list: () => [...entries.values()].map(({ state }) => structuredClone(state)),
    idle: () => queue,
  };
}

function handleOf(entry: Entry, tell: (entry: Entry) => void, now: () => number): JobHandle {
  return {
    get cancelled() {
      return entry.cancelled;
    },
    onCancel(stop) {
      entry.stop = stop;
    },
    total(total) {
      entry.state.total = total;
    },
    progress(done) {
      entry.state.done = done;
      if (now() - entry.lastTold >= eventsApart_ms) tell(entry);
    },
    run(run) {
      entry.state.run = run;
    },
    problem(file, error) {
      if (entry.state.problems.length < mostProblems)
        entry.state.problems.push({ file, ...describeFailure(error) });
    },
  };
}

/** From the pace so far; null until a twentieth of the work or half a second gives one. */
function secondsLeft({ state, started }: Entry, time: number): number | null {
  if (state.state !== "working") return null;
  const elapsed_s = (time - started) / 1000;
  if (state.done <= 0 || state.total <= 0 || (state.done < state.total / 20 && elapsed_s < 0.5)) return null;
  return Math.max(0, (elapsed_s * (state.total - state.done)) / state.done);
}

function forgetOldest(entries: Map<string, Entry>) {
  for (const [job, { state }] of entries) {
    if (entries.size <= mostRemembered) return;
    if (state.state !== "working") entries.delete(job);
  }
}
