import type { RunRow } from "../bridge.ts";
import type { Book } from "../host/book/index.ts";
import { UsageError } from "./usage.ts";

/** The run that `--run` names, by its name or its number in the book; the latest of that name. */
export function findRun(book: Book, named: string | undefined): RunRow {
  if (named === undefined) throw new UsageError("say which run with --run NAME; `ringbook log` lists them");
  const byName = eachRun(book).find((run) => run.name === named);
  const found = byName ?? eachRun(book).find((run) => String(run.run) === named);
  if (!found)
    throw new UsageError(`the book ${book.path} has no run "${named}"; \`ringbook log\` lists them`);
  return found;
}

/** All runs, the latest first. */
export function eachRun(book: Book, query: { coil?: string } = {}): RunRow[] {
  const rows: RunRow[] = [];
  for (let cursor: string | null = null; ;) {
    const page = book.runs({ ...query, cursor, limit: 1000 });
    rows.push(...page.rows);
    if (page.cursor === null) return rows;
    cursor = page.cursor;
  }
}
