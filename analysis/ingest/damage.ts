/** What is wrong with the lines of a file: noted where a record can stand it, refused where not. */
import type { Note } from "../capture.ts";
import { ReadingError } from "../errors.ts";
import type { Columns } from "./columns.ts";
import type { Layout } from "./layout.ts";

const mostDamaged = 0.05;

export function damageNotes(layout: Layout, columns: Columns): Note[] {
  const { odd, oddMore, rows } = columns;
  const byKind = (kind: string) => odd.filter((line) => line.kind === kind);
  const notes: Note[] = [];
  const unreadable = byKind("unreadable");
  const damaged = unreadable.length + byKind("long").length + oddMore;
  if (damaged > Math.max(3, mostDamaged * rows)) {
    const [first] = odd.filter(({ kind }) => !["text", "empty-cells", "beside"].includes(kind));
    throw new ReadingError(
      "damaged-lines",
      `${damaged} of ${rows} lines can't be read as numbers, first "${(first ?? odd[0]).text.slice(0, 60)}"`,
      "The file is damaged or no waveform; export it again",
      { byte: layout.dataStart + (first ?? odd[0]).byte },
    );
  }
  const lineOf = ({ row }: (typeof odd)[number]) => layout.dataLine + row;
  const say = (code: string, lines: typeof odd, text: string) => {
    if (lines.length > 0)
      notes.push({
        code,
        text: `${lines.length} ${text} (the first at line ${lineOf(lines[0])} or soon after: "${lines[0].text.slice(0, 60)}").`,
      });
  };
  say(
    "unreadable-cells",
    unreadable,
    "lines hold cells that are no numbers; those samples count as unusable",
  );
  say("long-lines", byKind("long"), "lines have more cells than the others; the first ones are used");
  say(
    "cells-beside",
    byKind("beside"),
    "lines hold a cell in a column that is blank elsewhere; it is left out",
  );
  if (columns.cutLine !== null) {
    const text = `The file ends in mid-line ("${columns.cutLine.slice(0, 60)}"); that line is left out.`;
    notes.push({ code: "cut-last-line", text });
  }
  if (layout.block.skipped > 0) {
    const text = `${layout.block.skipped} lines of numbers above the data were taken for a table of the header.`;
    notes.push({ code: "lines-skipped", text });
  }
  const stated = Math.min(...layout.timing.lengths);
  if (Number.isFinite(stated) && stated > 1.02 * rows) {
    const text = `The header states ${stated} samples, the file holds ${rows}: it may have been cut.`;
    notes.push({ code: "fewer-samples", text });
  }
  say(
    "short-lines",
    byKind("short"),
    "lines have fewer cells than the others; what is missing counts as unusable",
  );
  return notes;
}
