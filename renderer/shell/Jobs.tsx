/** What is being read: how far, how long still, and a way to stop it; then what could not be read. */
import { useEffect } from "react";
import type { JobState } from "../../app/bridge.ts";
import { fileName, plural, timeLeft } from "../format/words.ts";
import { useDesk } from "../state/bench.tsx";
import { useKeys } from "../state/keys.ts";
import { hrefOf } from "../state/route.ts";

const lingers_ms = 5000;

export function Jobs() {
  const { jobs, bench } = useDesk();
  const working = jobs.filter((job) => job.state === "working");
  const cancel = (job: string) => bench.call("cancel", { job }).catch(() => undefined);
  useKeys(
    "while reading",
    working.length > 0
      ? [{ key: "escape", does: "stop reading", act: () => working.forEach((job) => cancel(job.job)) }]
      : [],
  );
  if (jobs.length === 0) return null;
  return (
    <section className="jobs no-print" aria-label="What is being read">
      {jobs.map((job) => (
        <JobLine key={job.job} job={job} onCancel={() => cancel(job.job)} />
      ))}
    </section>
  );
}

const ended: Record<JobState["state"], string> = {
  working: "",
  done: "done",
  cancelled: "stopped; what was read stays",
  failed: "failed",
};

function JobLine({ job, onCancel }: { job: JobState; onCancel(): void }) {
  const { forgetJob } = useDesk();
  const quiet = job.state === "done" && job.problems.length === 0;
  useEffect(() => {
    if (!quiet) return undefined;
    const timer = setTimeout(() => forgetJob(job.job), lingers_ms);
    return () => clearTimeout(timer);
  }, [quiet, job.job, forgetJob]);
  const isWorking = job.state === "working";
  return (
    <div className="job">
      <p role={isWorking ? undefined : "status"}>
        {job.what}:{" "}
        {isWorking ? (job.total > 0 ? `${job.done} of ${job.total}` : "looking …") : ended[job.state]}
        {isWorking && job.secondsLeft !== null && `, ${timeLeft(job.secondsLeft)}`}{" "}
        {isWorking ? (
          <>
            <progress max={Math.max(job.total, 1)} value={job.done} aria-label={job.what} />{" "}
            <button type="button" className="small" onClick={onCancel}>
              <kbd>Esc</kbd> stop
            </button>
          </>
        ) : (
          <>
            {job.run !== null && <a href={hrefOf({ view: "run", run: job.run })}>open the run</a>}{" "}
            <button type="button" className="small" onClick={() => forgetJob(job.job)}>
              put aside
            </button>
          </>
        )}
      </p>
      {job.problems.length > 0 && (
        <details open={!isWorking}>
          <summary>{plural(job.problems.length, "file")} could not be read</summary>
          <ul>
            {job.problems.map((problem) => (
              <li key={problem.file + problem.code}>
                <strong title={problem.file}>{fileName(problem.file)}</strong>: {problem.text}
              </li>
            ))}
          </ul>
        </details>
      )}
    </div>
  );
}
