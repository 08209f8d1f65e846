import { compareRuns } from "../../analysis/coil/compare.ts";
import { countSentence } from "../../analysis/format/counts.ts";
import { formatFigure } from "../../analysis/format/figure.ts";
import type { RunDetail, RunRow } from "../bridge.ts";
import type { Book } from "../host/book/index.ts";
import { withBook } from "./book-option.ts";
import { captureText } from "./capture-text.ts";
import { compareText } from "./compare-text.ts";
import { eachRun, findRun } from "./find-run.ts";
import { readArguments, say, UsageError, withUsage } from "./usage.ts";

/** ringbook log [--run NAME [--against NAME]] [--coil NAME] [--json] [--book FILE] */
export const run = (args: string[]) =>
  withUsage(async () => {
    const { values, positionals } = readArguments(args, {
      run: { type: "string" },
      against: { type: "string" },
      coil: { type: "string" },
      json: { type: "boolean" },
      book: { type: "string" },
    });
    if (positionals.length > 0) throw new UsageError(`log takes no path: ${positionals[0]}`);
    if (values.against !== undefined && values.run === undefined)
      throw new UsageError("--against wants --run, the run to be compared");
    return withBook(values.book, async (book) => {
      if (values.against !== undefined) {
        const [first, second] = [values.against, values.run].map((name) => book.run(findRun(book, name).run));
        say(values.json ? JSON.stringify(comparisonOf(first, second)) : compareText(first, second));
        return 0;
      }
      const rows = values.run === undefined ? eachRun(book, values) : [findRun(book, values.run)];
      if (values.json) for (const row of rows) say(runLine(book, row));
      else if (values.run !== undefined) printRun(book, rows[0]);
      else printTable(rows);
      return 0;
    });
  });

const comparisonOf = (first: RunDetail, second: RunDetail) => ({
  format: "ringbook.comparison/1",
  first: first.name,
  second: second.name,
  ...compareRuns(first, second),
});

/** `ringbook.run/1`: the run's counts and combined figures. */
function runLine(book: Book, { run, name, coil, taken, captures, counts }: RunRow): string {
  const { combined, notes, setup } = book.run(run);
  return JSON.stringify({
    format: "ringbook.run/1",
    run: name,
    coil,
    taken,
    captures,
    setup,
    ...counts,
    combined,
    notes,
  });
}

function printRun(book: Book, row: RunRow): void {
  const { combined } = book.run(row.run);
  say(`${row.name}${row.coil === null ? "" : `  (${row.coil})`}  ${countsText(row)}`);
  say(`L ${formatFigure(combined.inductance_H, "H")}  Q ${formatFigure(combined.q, "")}`);
  for (const { file, reading, setup } of book.captures(row.run)) say(captureText(file, reading, setup));
}

function printTable(rows: RunRow[]): void {
  if (rows.length === 0) say("the book holds no run yet; `ringbook read PATH --book FILE` adds one");
  const width = Math.max(0, ...rows.map(({ name }) => name.length));
  for (const row of rows)
    say(
      `${String(row.run).padStart(5)}  ${(row.taken ?? "").slice(0, 10).padEnd(10)}  ${row.name.padEnd(width)}  ${countsText(row)}`,
    );
}

const countsText = ({ captures, counts }: RunRow) => `${captures} captures, ${countSentence(counts)}`;
