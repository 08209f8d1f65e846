/** The Bench for every component, and answers that are asked anew when the book changes. */
import { createContext, useCallback, useContext, useEffect, useMemo, useState, type ReactNode } from "react";
import type { Answer, Argument, Bench, BenchEvent, CommandName, JobState } from "../../app/bridge.ts";

interface Desk {
  bench: Bench;
  /** Grows when anything of the book changed. */
  book: number;
  /** Grows when this run changed. */
  runs: Record<number, number>;
  jobs: JobState[];
  forgetJob(job: string): void;
  /** Jobs started on this page: their runs open when they are done. */
  followed: string[];
  follow(job: string): void;
}

const DeskContext = createContext<Desk | null>(null);

export function useDesk(): Desk {
  const desk = useContext(DeskContext);
  if (!desk) throw new Error("useDesk outside DeskProvider");
  return desk;
}

export const useBench = () => useDesk().bench;

export function DeskProvider({ bench, children }: { bench: Bench; children: ReactNode }) {
  const [book, setBook] = useState(0);
  const [runs, setRuns] = useState<Record<number, number>>({});
  const [jobs, setJobs] = useState<JobState[]>([]);
  const [followed, setFollowed] = useState<string[]>([]);

  useEffect(() => {
    const keepJob = (job: JobState) =>
      setJobs((old) => [...old.filter((other) => other.job !== job.job), job]);
    const take = (event: BenchEvent) => {
      if (event.type === "job") keepJob(event.job);
      if (event.type === "book-changed") setBook((old) => old + 1);
      if (event.type === "run-changed") {
        setBook((old) => old + 1);
        setRuns((old) => ({ ...old, [event.run]: (old[event.run] ?? 0) + 1 }));
      }
    };
    const end = bench.subscribe(take);
    // A page reloaded in mid-read goes on with the jobs that are still working.
    bench.call("jobs", {}).then(
      (known) => known.filter((job) => job.state === "working").forEach(keepJob),
      () => undefined,
    );
    return end;
  }, [bench]);

  const follow = useCallback((job: string) => setFollowed((old) => [...old, job]), []);
  const desk = useMemo(
    () => ({
      bench,
      book,
      runs,
      jobs,
      followed,
      follow,
      forgetJob: (job: string) => setJobs((old) => old.filter((other) => other.job !== job)),
    }),
    [bench, book, runs, jobs, followed, follow],
  );
  return <DeskContext value={desk}>{children}</DeskContext>;
}

export interface Asked<T> {
  answer: T | null;
  error: string | null;
  waiting: boolean;
}

/**
 * The answer to one call. A new argument starts empty, a new revision keeps the old answer on the
 * page until the new one is there. A null argument asks nothing.
 */
export function useAnswer<Name extends CommandName>(
  name: Name,
  argument: Argument<Name> | null,
  revision = 0,
): Asked<Answer<Name>> {
  const bench = useBench();
  const key = argument === null ? null : JSON.stringify(argument);
  const [held, setHeld] = useState<Held<Answer<Name>> | null>(null);

  useEffect(() => {
    if (key === null) return undefined;
    let wanted = true;
    const hold = (answer: Answer<Name> | null, error: string | null) =>
      wanted && setHeld({ key, revision, answer, error });
    bench.call(name, JSON.parse(key) as Argument<Name>).then(
      (answer) => hold(answer, null),
      (error: unknown) => hold(null, messageOf(error)),
    );
    return () => {
      wanted = false;
    };
  }, [bench, name, key, revision]);

  if (!held || held.key !== key) return { answer: null, error: null, waiting: key !== null };
  return { answer: held.answer, error: held.error, waiting: held.revision !== revision };
}

interface Held<T> {
  key: string;
  revision: number;
  answer: T | null;
  error: string | null;
}

export const messageOf = (error: unknown) => (error instanceof Error ? error.message : String(error));
