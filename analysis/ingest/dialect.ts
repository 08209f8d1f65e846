/** Separator and decimal mark, found together from the number-like lines, not from the first line. */
import { splitCells } from "./cells.ts";
import { readCell, type CellKind, type NumberFormat } from "./number.ts";
import { groupsDigits } from "./thousands.ts";

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
  /** Number cells less a part of the text cells: what makes one reading of the file better than another. */
  score: number;
  numbers: number;
  texts: number;
}

export interface DialectChoice {
  dialect: Dialect;
  rows: Row[];
  best: Run;
}

const separators = ["\t", ";", "|", ",", " "];

/** Judged by the last of the lines, where the data are; up to this many characters of them. */
const judged = 40_000;
/** Lines with as many words as numbers ("Event 7") are prose unless there are many. */
const fewestMixed = 10;
/** A wrong separator makes texts of numbers; a column of dates is no fault. */
const textWeight = 0.4;

/** null when no line holds a number in any dialect. */
export function chooseDialect(lines: string[], decimalMark: "." | "," | null): DialectChoice | null {
  const sample = lastLines(lines);
  let chosen: { dialect: Dialect; score: number } | null = null;
  for (const dialect of candidates(sample, decimalMark)) {
    const score = totalScore(sample.map((line) => readRow(line, dialect)));
    if (score > (chosen?.score ?? -Infinity)) chosen = { dialect, score };
  }
  if (!chosen) return null;
  let { dialect } = chosen;
  let rows = lines.map((line) => readRow(line, dialect));
  let best = bestRun(rows);
  const { decimal, thousands } = dialect.format;
  if (best && !decimalMark && thousands === null && groupsDigits(rows, best, decimal)) {
    dialect = { ...dialect, format: { decimal: otherMark(decimal), thousands: decimal } };
    rows = lines.map((line) => readRow(line, dialect));
    best = bestRun(rows);
  }
  const prose = best !== null && best.numbers <= best.texts && best.to - best.from < fewestMixed;
  return best === null || prose ? null : { dialect, rows, best };
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
  // A single one is a damaged cell.
  const apostrophes = text.match(/\d'\d{3}/g)?.length ?? 0;
  const groups = ["none", "mark", ...(apostrophes > 1 ? ["'"] : [])];
  for (const group of groups)
    for (const separator of separators) {
      if (separator !== " " && !text.includes(separator)) continue;
      for (const decimal of [".", ","] as const) {
        if (decimal === "," && (separator === "," ? !quotedFraction.test(text) : !text.includes(",")))
          continue;
        if (decimalMark && decimal !== decimalMark && !(separator === "," && decimalMark === ",")) continue;
        const mark = otherMark(decimal);
        const possible = text.includes(mark) && (mark !== separator || text.includes('"'));
        if (group === "mark" && !possible) continue;
        const thousands = group === "none" ? null : group === "mark" ? mark : group;
        found.push({ separator, format: { decimal, thousands } });
      }
    }
  return found;
}

/** Between commas a decimal comma stands in quotes; three digits behind it may be a group of thousands. */
const quotedFraction = /"\s*[+-]?\d+,(\d{1,2}|\d{4,})(e[+-]?\d+)?\s*"/i;

const otherMark = (mark: "." | ",") => (mark === "." ? "," : ".");

export function readRow(line: string, { separator, format }: Dialect): Row {
  const cells = splitCells(line, separator);
  return { cells, kinds: cells.map((cell) => readCell(cell, format).kind) };
}

/** Over all lines of one width, so that a damaged line among them settles nothing. */
function totalScore(rows: Row[]): number {
  const byWidth = new Map<number, number>();
  for (const { kinds } of rows) {
    const { numbers, texts } = count(kinds);
    if (numbers > 0)
      byWidth.set(kinds.length, (byWidth.get(kinds.length) ?? 0) + numbers - textWeight * texts);
  }
  return Math.max(-Infinity, ...byWidth.values());
}

function count(kinds: CellKind[]): { numbers: number; texts: number } {
  let [numbers, texts] = [0, 0];
  for (const kind of kinds) {
    if (kind === "number" || kind === "over") numbers++;
    else if (kind === "text") texts++;
  }
  return { numbers, texts };
}

function bestRun(rows: Row[]): Run | null {
  let best: Run | null = null;
  let run: Run | null = null;
  for (const [i, { kinds }] of rows.entries()) {
    const { numbers, texts } = count(kinds);
    if (numbers === 0) {
      if (kinds.every((kind) => kind === "blank")) continue;
      run = null;
      continue;
    }
    if (!run || run.width !== kinds.length)
      run = { from: i, to: i, width: kinds.length, score: 0, numbers: 0, texts: 0 };
    run.to = i + 1;
    run.numbers += numbers;
    run.texts += texts;
    run.score = run.numbers - textWeight * run.texts;
    if (!best || run.score > best.score) best = run;
  }
  return best;
}
