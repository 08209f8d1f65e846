/** Unbroken stretches of data lines, and which of them begins the data. */
import type { Row } from "./dialect.ts";

export interface Stretch {
  from: number;
  to: number;
  lines: number;
}

/** Fewer lines than this, and far fewer than the longest stretch: a table of the preamble. */
const tableLines = 20;
/** A damaged line or two does not end the data. */
const mostDamaged = 2;

/**
 * The first stretch that is no table of the preamble; further ones behind it are further segments.
 * `skipped`: lines of numbers before it.
 */
export function firstStretch(rows: Row[], isData: (row: Row) => boolean, numeric: number[]) {
  const stretches = bridged(findStretches(rows, isData), rows, numeric);
  const longest = Math.max(...stretches.map(({ lines }) => lines));
  const first = stretches.findIndex(({ lines }) => lines >= Math.min(tableLines, longest / 2));
  const skipped = stretches.slice(0, first).reduce((sum, { lines }) => sum + lines, 0);
  return { stretch: stretches[first], skipped };
}

function findStretches(rows: Row[], isData: (row: Row) => boolean): Stretch[] {
  const stretches: Stretch[] = [];
  let open: Stretch | null = null;
  for (const [i, row] of rows.entries()) {
    if (isData(row)) {
      if (!open) stretches.push((open = { from: i, to: i, lines: 0 }));
      open.to = i + 1;
      open.lines++;
    } else if (!isEmpty(row)) open = null;
  }
  return stretches;
}

const isEmpty = ({ kinds }: Row) => kinds.every((kind) => kind === "blank");

/** Joins stretches that only damaged lines part: lines with a number left, or across which a column goes on. */
function bridged(stretches: Stretch[], rows: Row[], numeric: number[]): Stretch[] {
  const joined: Stretch[] = [];
  for (const stretch of stretches) {
    const before = joined[joined.length - 1];
    if (before && isBridge(rows, before, stretch, numeric)) {
      before.to = stretch.to;
      before.lines += stretch.lines;
    } else joined.push({ ...stretch });
  }
  return joined;
}

function isBridge(rows: Row[], before: Stretch, after: Stretch, numeric: number[]): boolean {
  const between = rows.slice(before.to, after.from).filter((row) => !isEmpty(row));
  if (between.length > mostDamaged) return false;
  if (numeric.some((column) => goesOn(rows, before, after, column))) return true;
  return (
    before.lines > 1 && between.every(({ kinds }) => numeric.some((column) => kinds[column] === "number"))
  );
}

function goesOn(rows: Row[], before: Stretch, after: Stretch, column: number): boolean {
  if (before.lines < 3) return false;
  const value = (row: number) => Number(rows[row].cells[column]?.replace(",", "."));
  const step = (value(before.to - 1) - value(before.from)) / (before.to - 1 - before.from);
  const steps = (value(after.from) - value(before.to - 1)) / step;
  return steps > 0.5 && steps < 2 * mostDamaged + 1.5;
}
