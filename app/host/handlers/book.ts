import { compareRuns } from "../../../analysis/coil/compare.ts";
import { version } from "../../../package.json";
import type { Handlers } from "../call.ts";
import { courseOf } from "../view/course.ts";
import { exportRun } from "../handover/index.ts";
import type { BenchParts } from "./bench-parts.ts";

type FromBook =
  | "hello"
  | "runs"
  | "run"
  | "pulses"
  | "course"
  | "compare"
  | "capture"
  | "rule"
  | "exportRun"
  | "preferences"
  | "setPreference";

/** What the bench book answers by itself. */
export function bookHandlers({ book, emit, views }: BenchParts): Pick<Handlers, FromBook> {
  return {
    hello: () => ({
      version,
      book: { path: book.path, readOnly: book.readOnly, note: book.note },
      paths: true,
      runs: book.runCount(),
    }),
    runs: (query) => book.runs(query),
    run: ({ run }) => book.run(run),
    pulses: ({ run, cursor, limit }) => book.pulses(run, { cursor, limit }),
    course: ({ run }) => courseOf(book.captures(run), book.trends(run)),
    compare: ({ first, second }) => compareRuns(book.run(first), book.run(second)),
    capture: ({ capture }) => book.capture(capture),
    rule({ capture, pulse, verdict, remark }) {
      const ruled = book.rule(capture, pulse, verdict, remark);
      emit({ type: "run-changed", run: book.captureFile(capture).run });
      return { ruled };
    },
    exportRun: ({ run, kind }) => exportRun(book, run, kind, views),
    preferences: () => book.preferences(),
    setPreference({ key, value }) {
      book.setPreference(key, value);
      return { kept: true };
    },
  };
}
