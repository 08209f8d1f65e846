/** Separator and decimal mark, found together from the number-like lines, not from the first line. */
import { splitCells } from "./cells.ts";
import { readCell, type CellKind, type NumberFormat } from "./number.ts";

export interface Dialect {
  separator: string;
  format: NumberFormat;
}

/** One line's cells and what each is. */
export interface Row {
  cells: string[];
  kinds: CellKind[];
}

/** A run of neighbouring lines with the same number of cells and at least one number each. */
export interface Run {
  from: number;
  to: number;
  width: number;
  /** Number cells less text cells: what makes one reading of the file better than another. */
  score: number;
}

export interface DialectChoice {
  dialect: Dialect;
  rows: Row[];
  best: Run;
}

const separators = ["\t", ";", ",", " "];

/** Judged by the last of the lines, where the data are; up to this many characters of them. */
const judged = 40_000;
/** Lines with as many words as numbers ("Event 7") are prose unless there are many. */
const fewestMixed = 10;

/** null when no line holds a number in any dialect. */
export function chooseDialect(lines: string[], decimalMark: "." | "," | null): DialectChoice | null {
  const sample = lastLines(lines);
  let chosen: { dialect: Dialect; score: number } | null = null;
  for (const dialect of candidates(sample, decimalMark)) {
    const score = bestRun(sample.map((line) => readRow(line, dialect)))?.score ?? -Infinity;
    if (score > (chosen?.score ?? -Infinity)) chosen = { dialect, score };
  }
  if (!chosen) return null;
  const { dialect } = chosen;
  const rows = lines.map((line) => readRow(line, dialect));
  const best = bestRun(rows);
  const words = best !== null && (best.score < 0 || (best.score === 0 && best.to - best.from < fewestMixed));
  return best === null || words ? null : { dialect, rows, best };
}

function lastLines(lines: string[]): string[] {
  let from = lines.length;
  for (let size = 0; from > 0 && (size < judged || lines.length - from < 3); from--)
    size += lines[from - 1].length;
  return lines.slice(from);
}

// In order of preference: a later one must do better, not as well.
function candidates(lines: string[], decimalMark: "." | "," | null): Dialect[] {
  const text = lines.slice(0, 2000).join("\n");
  const found: Dialect[] = [];
  for (const thousands of [false, true])
    for (const separator of separators) {
      if (separator !== " " && !text.includes(separator)) continue;
      for (const decimal of [".", ","] as const) {
        if (decimal === "," && (separator === "," || !text.includes(","))) continue;
        if (decimalMark && decimal !== decimalMark && !(separator === "," && decimalMark === ",")) continue;
        const mark = decimal === "." ? "," : ".";
        const possible = text.includes(mark) && (mark !== separator || text.includes('"'));
        if (thousands && !possible) continue;
        found.push({ separator, format: { decimal, thousands: thousands ? mark : null } });
      }
    }
  return found;
}

export function readRow(line: string, { separator, format }: Dialect): Row {
  const cells = splitCells(line, separator);
  return { cells, kinds: cells.map((cell) => readCell(cell, format).kind) };
}

function bestRun(rows: Row[]): Run | null {
  let best: Run | null = null;
  let run: Run | null = null;
  for (const [i, { kinds }] of rows.entries()) {
    const numbers = kinds.filter((kind) => kind === "number" || kind === "over").length;
    const texts = kinds.filter((kind) => kind === "text").length;
    if (numbers === 0) {
      if (kinds.every((kind) => kind === "blank")) continue;
      run = null;
      continue;
    }
    if (!run || run.width !== kinds.length) run = { from: i, to: i, width: kinds.length, score: 0 };
    run.to = i + 1;
    run.score += numbers - texts;
    if (!best || run.score > best.score) best = run;
  }
  return best;
}
