/**
 * "999;1,000;12,345": a mark that groups digits, though every such cell could be a decimal fraction too. A
 * writer of fractions prints zeros before the mark ("0,500"), and one that strips zeros prints one or two
 * digits behind it in nine of ten cells; a column that never does either, and has cells below 1000 without the
 * mark, is grouped.
 */
import type { Row, Run } from "./dialect.ts";

const fewestGrouped = 10;

/** `mark`: what was taken for the decimal mark. */
export function groupsDigits(rows: Row[], { from, to, width }: Run, mark: "." | ","): boolean {
  const inRun = rows.slice(from, to).filter(({ cells }) => cells.length === width);
  const edge = mark === "." ? String.raw`\.` : ",";
  const whole = new RegExp(`^[+-]?[1-9]\\d{0,2}(${edge}\\d{3})+$`);
  let found = false;
  for (let column = 0; column < width; column++) {
    const cells = inRun.map((row) => row.cells[column].trim().replace(/^"(.*)"$/, "$1"));
    const marked = cells.filter((cell) => /\d/.test(cell) && cell.includes(mark));
    if (marked.length === 0) continue;
    if (!marked.every((cell) => whole.test(cell))) return false;
    const small = cells.some((cell) => /^[+-]?[1-9]\d{0,2}$/.test(cell));
    const large = cells.some((cell) => /^[+-]?\d{4,}$/.test(cell));
    found ||= marked.length >= fewestGrouped && small && !large;
  }
  return found;
}
