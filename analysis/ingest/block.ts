/** Where the data lie: which lines, which columns; what stands beside and above is metadata. */
import { ReadingError } from "../errors.ts";
import { filledWidth } from "./cells.ts";
import type { DialectChoice, Row, Run } from "./dialect.ts";
import { firstStretch } from "./stretches.ts";
import { looksSymbolic } from "./symbols.ts";

export interface Block {
  /** First data line, as an index into the sniffed lines. */
  from: number;
  /** One past the last of the first unbroken stretch of data lines. */
  to: number;
  /** Cells a data line has, empty ones included. */
  width: number;
  /** Cells up to the last column that holds anything as a rule. */
  filled: number;
  /** Columns with numbers, in order. */
  numeric: number[];
  /** Columns of words and symbols beside them. */
  symbolic: number[];
  /** Lines of numbers above the data that were taken for a table of the preamble. */
  skipped: number;
}

const isNumber = (kind: string) => kind === "number" || kind === "over" || kind === "missing";

export function findBlock({ rows, best }: DialectChoice): Block {
  const inRun = rows.slice(best.from, best.to).filter((row) => row.kinds.length === best.width);
  const numeric = numericColumns(inRun, best);
  const isData = (row: Row) =>
    Math.abs(filledWidth(row.cells) - filledWidth(inRun[inRun.length - 1].cells)) <= best.width &&
    row.kinds.length >= Math.min(best.width, numeric[numeric.length - 1] + 1) &&
    row.kinds.length <= best.width + 1 &&
    numeric.some((column) => isNumber(row.kinds[column])) &&
    numeric.every((column) => row.kinds[column] !== "text");
  const { stretch, skipped } = firstStretch(rows, isData, numeric);
  const data = rows.slice(stretch.from, stretch.to);
  const symbolic = symbolColumns(data, best.width, numeric);
  refuseHalfNumbers(data, best.width, [...numeric, ...symbolic]);
  const filled = filledColumns(data, best.width, Math.max(...numeric, ...symbolic));
  return { from: stretch.from, to: stretch.to, width: best.width, filled, numeric, symbolic, skipped };
}

/** Right of the data stand settings (a word, its value), or a column that is blank but for a stray cell. */
function filledColumns(rows: Row[], width: number, last: number): number {
  const strays = Math.max(2, 0.01 * rows.length);
  for (let column = width - 1; column > last; column--) {
    const filled = rows.filter(({ kinds }) => (kinds[column] ?? "blank") !== "blank");
    const isSetting = filled.some(({ kinds }) => kinds.slice(last + 1, column + 1).includes("text"));
    if (filled.length > strays || isSetting) return column + 1;
  }
  return last + 1;
}

/** The pattern most lines share, and columns that fill up later (blank while the screen still rolled). */
function numericColumns(rows: Row[], { width }: Run): number[] {
  const patterns = new Map<string, number>();
  for (const { kinds } of rows) {
    const pattern = kinds.map((kind) => (isNumber(kind) ? "n" : " ")).join("");
    patterns.set(pattern, (patterns.get(pattern) ?? 0) + 1);
  }
  const common = [...patterns].reduce((a, b) => (b[1] > a[1] ? b : a))[0];
  const columns: number[] = [];
  for (let column = 0; column < width; column++)
    if (common[column] === "n" ? mostlyNumbers(rows, column) : fillsUp(rows, column)) columns.push(column);
  return columns.length > 0 ? columns : [[...common].indexOf("n")].filter((column) => column >= 0);
}

/** A column is numeric only if almost all its filled cells are: a hex word can look like a number. */
function mostlyNumbers(rows: Row[], column: number): boolean {
  let texts = 0;
  let numbers = 0;
  for (const { kinds } of rows) {
    if (kinds[column] === "text") texts++;
    else if (isNumber(kinds[column])) numbers++;
  }
  return numbers > 0 && texts <= Math.max(0.05 * rows.length, rows.length < 60 ? 0.45 * rows.length : 0);
}

function fillsUp(rows: Row[], column: number): boolean {
  const first = rows.findIndex(({ kinds }) => isNumber(kinds[column]));
  if (first < 0) return false;
  const texts = rows.filter(({ kinds }) => kinds[column] === "text").length;
  const after = rows.slice(first);
  const filled = after.filter(({ kinds }) => isNumber(kinds[column])).length;
  return texts === 0 && filled >= 0.9 * after.length && filled >= 3;
}

function symbolColumns(rows: Row[], width: number, numeric: number[]): number[] {
  const columns: number[] = [];
  for (let column = 0; column < width; column++) {
    if (numeric.includes(column)) continue;
    const cells = rows.map((row) => row.cells[column] ?? "").filter((cell) => cell.trim() !== "");
    if (cells.length < 0.95 * rows.length || !looksSymbolic(cells)) continue;
    if (new Set(cells.map((cell) => cell.trim())).size > 1) columns.push(column);
  }
  return columns;
}

/** Numbers and words mixed down a whole column: damage, which must not pass for metadata beside the data. */
function refuseHalfNumbers(rows: Row[], width: number, known: number[]): void {
  for (let column = 0; column < width; column++) {
    if (known.includes(column)) continue;
    const later = rows.slice(rows.length >> 1);
    const numbers = later.filter(({ kinds }) => isNumber(kinds[column])).length;
    const texts = later.filter(({ kinds }) => kinds[column] === "text").length;
    if (numbers < 0.1 * later.length || texts < 0.02 * later.length || texts < 3) continue;
    throw new ReadingError(
      "damaged-lines",
      `Cell ${column + 1} of the rows is a number in some lines and text in others`,
      "The file is damaged or no waveform; export it again",
    );
  }
}
