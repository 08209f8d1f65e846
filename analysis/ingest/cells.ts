import Papa from "papaparse";

/**
 * Splits one line into cells. Lines with quotes go through PapaParse (RFC 4180, section 2); exporters also
 * write blanks about a quoted cell, which the standard does not know: then they are taken off.
 */
export function splitCells(line: string, separator: string): string[] {
  if (separator === " ") return line.trim().split(/[ \t]+/);
  if (!line.includes('"')) return line.split(separator);
  const cells = parsed(line, separator);
  return cells.some((cell) => /^ +"/.test(cell)) ? parsed(withoutBlanks(line, separator), separator) : cells;
}

const parsed = (line: string, separator: string) =>
  Papa.parse<string[]>(line, { delimiter: separator }).data[0] ?? [""];

/** Blanks between a separator, or the line's edge, and a quote. */
function withoutBlanks(line: string, separator: string): string {
  const edge = separator.replace(/[|\\^$.*+?()[\]{}]/g, "\\$&");
  return line
    .replace(new RegExp(`(^|${edge}) +(?=")`, "g"), "$1")
    .replace(new RegExp(`" +(?=${edge}|$)`, "g"), '"');
}

/** How many cells stand before the trailing empty ones. */
export function filledWidth(cells: string[]): number {
  let width = cells.length;
  while (width > 0 && cells[width - 1].trim() === "") width--;
  return width;
}
