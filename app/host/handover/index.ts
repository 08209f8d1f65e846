import type { Answer, Argument, RingPicture, TraceWindow } from "../../bridge.ts";
import type { Book } from "../book/index.ts";
import { captureLine } from "../capture-line.ts";
import { capturesOf } from "../handlers/coil.ts";
import { pulseTable } from "./csv.ts";
import { reportPage } from "./report.ts";

/** Where the report's drawings come from: whoever holds the raw samples. */
export interface Views {
  trace(argument: Argument<"trace">): Promise<TraceWindow>;
  ringPicture(argument: Argument<"ringPicture">): Promise<RingPicture | null>;
}

/** A run to hand over: a table for spreadsheets, lines for machines, or a page for people. */
export async function exportRun(
  book: Book,
  run: number,
  kind: Argument<"exportRun">["kind"],
  views: Views,
): Promise<Answer<"exportRun">> {
  const { name: title } = book.run(run);
  const name = (ending: string) => `${fileName(title)}.${ending}`;
  const captures = book.captures(run);
  if (kind === "csv")
    return { name: name("csv"), mime: "text/csv;charset=utf-8", text: pulseTable(captures) };
  if (kind === "jsonl") {
    const lines = captures.map(({ file, sha256, setup, reading }) =>
      captureLine(file, sha256, setup, reading),
    );
    return {
      name: name("jsonl"),
      mime: "application/jsonl",
      text: lines.map((line) => `${line}\n`).join(""),
    };
  }
  const detail = book.run(run);
  const ofCoil = detail.coil === null ? captures : capturesOf(book, detail.coil);
  const text = await reportPage({ run: detail, captures, ofCoil, history: book.history(run) }, views);
  return { name: name("html"), mime: "text/html;charset=utf-8", text };
}

/** Letters, digits and hyphens of the title, so that every system takes it as a name. */
const fileName = (title: string) =>
  title
    .normalize("NFKD")
    .replace(/[^\p{L}\p{N}]+/gu, "-")
    .replace(/^-+|-+$/g, "")
    .slice(0, 80) || "run";
