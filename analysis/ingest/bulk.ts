/** The numeric bulk: whole lines of bytes → one Float64Array a column, and what was odd about them. */
import { joinDecimalCommas } from "./join-commas.ts";
import { decodeText } from "./encoding.ts";
import { readCell, type NumberFormat } from "./number.ts";
import { scanEnd, scanNumber } from "./scan-number.ts";
import { readSymbol } from "./symbols.ts";

export interface BulkPlan {
  /** Byte between cells; 32 stands for any run of blanks and tabs. */
  separator: number;
  format: NumberFormat;
  /** Cells a line needs for its last wanted column. */
  width: number;
  /** Cells a line has; more filled ones are odd. */
  cells: number;
  /** Of those, the ones that hold anything as a rule. */
  filled: number;
  /** Columns wanted, in rising order. */
  columns: number[];
  /** Of those, the ones that hold words or symbols (hex words are read, the rest is NaN). */
  symbols: number[];
  /** Without a time column a line of separators alone is a sample without a number. */
  keepEmptyRows: boolean;
  /** Every first comma of two is a decimal mark. */
  joinCommas: boolean;
}

/** A line inside the block that is no row of numbers, or not a whole one. */
export interface OddLine {
  /** Rows before it, counted from the chunk's (in the end the block's) first. */
  row: number;
  /** Byte where the line begins, counted likewise. */
  byte: number;
  kind: "text" | "empty-cells" | "short" | "long" | "beside" | "unreadable";
  text: string;
}

/** How many cells of a column were no plain number, by kind. */
export interface ColumnTally {
  blank: number;
  missing: number;
  over: number;
  text: number;
}

export interface ParsedChunk {
  rows: number;
  values: Float64Array[];
  tallies: ColumnTally[];
  odd: OddLine[];
  /** Odd lines beyond those listed. */
  oddMore: number;
  /** First NUL byte, −1 without one. */
  nul: number;
}

const mostOdd = 2000;
const [tab, lineFeed, carriageReturn, space, quote] = [9, 10, 13, 32, 34];
const kinds = ["number", "blank", "missing", "over", "text"] as const;
const [isNumber, isBlank, isText] = [0, 1, 4];

/** Parses whole lines, which end after a line end, or at the end of the file. `reuse`: memory for the values. */
export function parseBulk(lines: Uint8Array, plan: BulkPlan, reuse: ArrayBufferLike[] = []): ParsedChunk {
  const bytes = withLineEnd(plan.joinCommas ? joinDecimalCommas(lines) : lines);
  const { width, separator, columns } = plan;
  const blanks = separator === space;
  const padding = separator === tab ? space : tab;
  const decimal = plan.format.decimal.charCodeAt(0);
  const chunk = new ChunkBuilder(bytes, plan, reuse);
  const slots = new Int32Array(width + 1).fill(-1);
  columns.forEach((column, slot) => (slots[column] = slot));
  const symbols = new Uint8Array(width + 1);
  plan.symbols.forEach((column) => (symbols[column] = 1));
  const { kindOf } = chunk;
  const end = bytes.length;
  let at = 0;
  let plain = true;
  while (at < end) {
    let byte = bytes[at];
    if (byte === lineFeed || byte === carriageReturn) {
      at++;
      continue;
    }
    const lineStart = at;
    chunk.reserveRow();
    const { values } = chunk;
    const row = chunk.rows;
    let odd = 0;
    let cell = 0;
    for (;;) {
      while (byte === space || byte === padding) byte = bytes[++at];
      const slot = cell < width ? slots[cell] : -1;
      let after = at;
      if (slot >= 0 && symbols[cell] === 0) {
        const value = scanNumber(bytes, at, decimal);
        after = scanEnd;
        byte = bytes[after];
        while (byte === space || byte === padding) byte = bytes[++after];
        const closed =
          byte === separator || byte === lineFeed || byte === carriageReturn || (blanks && after > scanEnd);
        if (scanEnd > at && closed && value < 9.8e37 && value > -9.8e37) {
          values[slot][row] = value;
          kindOf[slot] = isNumber;
        } else {
          after = endOfCell(bytes, at, separator);
          chunk.oddCell(slot, at, after);
          plain = false;
          odd = 1;
        }
      } else {
        after = endOfCell(bytes, at, separator);
        if (after > at) plain = false;
        if (slot >= 0) chunk.symbolCell(slot, at, after);
        else if (cell >= plan.filled && after > at) odd |= cell >= plan.cells ? 2 : 4;
      }
      at = after;
      cell++;
      byte = bytes[at];
      if (byte === lineFeed || byte === carriageReturn) break;
      if (!blanks) byte = bytes[++at];
    }
    if (odd === 0 && cell >= width) chunk.rows++;
    else chunk.oddLine(lineStart, at, cell, odd & 2 ? "long" : odd & 4 ? "beside" : null);
  }
  return chunk.done(plain);
}

/** Rows that a piece of so many bytes hardly exceeds. */
export const likelyRows = (bytes: number, { width }: BulkPlan) =>
  Math.ceil(bytes / Math.max(2, 6 * width)) + 16;

/** The loops stop at a line end: reading behind the array would make every read slower. */
function withLineEnd(bytes: Uint8Array): Uint8Array {
  const last = bytes[bytes.length - 1];
  if (last === lineFeed || last === carriageReturn) return bytes;
  const ended = new Uint8Array(bytes.length + 1);
  ended.set(bytes);
  ended[bytes.length] = lineFeed;
  return ended;
}

/** Quoted cells may hold the separator; a quote inside is doubled (RFC 4180, section 2). */
function endOfCell(bytes: Uint8Array, start: number, separator: number): number {
  const end = bytes.length;
  let at = start;
  if (bytes[at] === quote) {
    at++;
    while (at < end && bytes[at] !== lineFeed && bytes[at] !== carriageReturn) {
      if (bytes[at] !== quote) at++;
      else if (bytes[at + 1] === quote) at += 2;
      else break;
    }
  }
  for (; at < end; at++) {
    const byte = bytes[at];
    if (byte === separator || byte === lineFeed || byte === carriageReturn) break;
    if (separator === space && byte === tab) break;
  }
  return at;
}

/** Holds what is rare, so that the loop above stays tight. */
class ChunkBuilder {
  rows = 0;
  /** Kind of each wanted cell of the line under way. */
  readonly kindOf: Uint8Array;
  values: Float64Array[];
  private capacity: number;
  private readonly tallies: ColumnTally[];
  private readonly odd: OddLine[] = [];
  private oddMore = 0;

  constructor(
    private readonly bytes: Uint8Array,
    private readonly plan: BulkPlan,
    reuse: ArrayBufferLike[],
  ) {
    this.capacity = likelyRows(bytes.length, plan);
    this.values = plan.columns.map((_, slot) => {
      const used = reuse[slot];
      const { capacity } = this;
      return used?.byteLength >= 8 * capacity
        ? new Float64Array(used, 0, capacity)
        : new Float64Array(capacity);
    });
    this.tallies = plan.columns.map(() => ({ blank: 0, missing: 0, over: 0, text: 0 }));
    this.kindOf = new Uint8Array(plan.columns.length);
  }

  reserveRow(): void {
    if (this.rows < this.capacity) return;
    this.capacity *= 2;
    this.values = this.values.map((old) => {
      const grown = new Float64Array(this.capacity);
      grown.set(old);
      return grown;
    });
  }

  oddCell(slot: number, from: number, to: number): void {
    const { kind, value } = readCell(decodeText(this.bytes.subarray(from, to)), this.plan.format);
    this.kindOf[slot] = kinds.indexOf(kind);
    this.values[slot][this.rows] = value;
  }

  symbolCell(slot: number, from: number, to: number): void {
    const text = decodeText(this.bytes.subarray(from, to));
    this.kindOf[slot] = text.trim() === "" ? isBlank : isNumber;
    this.values[slot][this.rows] = readSymbol(text);
  }

  /** Decides what a line is that was not read in one go. */
  oddLine(from: number, to: number, cells: number, more: "long" | "beside" | null): void {
    const { plan, kindOf } = this;
    let numbers = 0;
    let texts = 0;
    let short = false;
    for (let slot = 0; slot < kindOf.length; slot++) {
      if (plan.columns[slot] >= cells) {
        kindOf[slot] = isBlank;
        this.values[slot][this.rows] = NaN;
        short = true;
      }
      if (kindOf[slot] === isText) texts++;
      else if (kindOf[slot] !== isBlank) numbers++;
    }
    if (numbers === 0 && (texts > 0 || !plan.keepEmptyRows || short)) {
      return this.note(from, to, texts > 0 ? "text" : "empty-cells");
    }
    if (texts > 0) this.note(from, to, "unreadable");
    else if (short) this.note(from, to, "short");
    else if (more) this.note(from, to, more);
    for (let slot = 0; slot < kindOf.length; slot++) {
      const kind = kinds[kindOf[slot]];
      if (kind !== "number") this.tallies[slot][kind]++;
    }
    this.rows++;
  }

  private note(from: number, to: number, kind: OddLine["kind"]): void {
    if (this.odd.length >= mostOdd) {
      if (kind !== "beside") this.oddMore++;
    } else
      this.odd.push({
        row: this.rows,
        byte: from,
        kind,
        text: decodeText(this.bytes.subarray(from, Math.min(to, from + 300))),
      });
  }

  /** `plain`: all of it was read as numbers, among which no NUL byte stands. */
  done(plain: boolean): ParsedChunk {
    return {
      rows: this.rows,
      values: this.values.map((column) => column.subarray(0, this.rows)),
      tallies: this.tallies,
      odd: this.odd,
      oddMore: this.oddMore,
      nul: plain ? -1 : this.bytes.indexOf(0),
    };
  }
}
