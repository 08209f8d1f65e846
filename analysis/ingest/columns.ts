/** Chunks in the file's order → whole columns. Channels grow in place; time columns are judged, not kept. */
import type { ColumnTally, OddLine, ParsedChunk } from "./bulk.ts";
import type { Layout } from "./layout.ts";
import { TimeColumn } from "./time-column.ts";

const mostOdd = 2000;

export class Columns {
  rows = 0;
  /** By column of the file. */
  readonly times = new Map<number, TimeColumn>();
  readonly tallies = new Map<number, ColumnTally>();
  readonly odd: OddLine[] = [];
  oddMore = 0;
  nul = -1;
  private readonly values = new Map<number, Float64Array<ArrayBuffer>>();
  private readonly order: number[];
  private readonly counter: number | null;
  /** Cells of the last data lines. */
  tail: string[][] = [];
  /** A last line that was cut, left out. */
  cutLine: string | null = null;
  private bytes = 0;

  /** `rows`: how many are likely, so that arrays are seldom copied. Memory never touched costs nothing. */
  constructor({ plan, axes }: Layout, rows: number) {
    this.order = plan.columns;
    this.counter = axes.counter;
    for (const { axis } of axes.groups) if (axis !== null) this.times.set(axis, new TimeColumn());
    for (const column of this.order) {
      this.tallies.set(column, { blank: 0, missing: 0, over: 0, text: 0 });
      if (!this.times.has(column) && column !== axes.counter) this.values.set(column, new Float64Array(rows));
    }
  }

  append(chunk: ParsedChunk, bytes: number): void {
    for (const [slot, column] of this.order.entries()) {
      const part = chunk.values[slot];
      if (column === this.counter) continue;
      const time = this.times.get(column);
      if (time) time.append(part);
      else this.room(column, this.rows + chunk.rows).set(part, this.rows);
      const tally = this.tallies.get(column) as ColumnTally;
      for (const kind of ["blank", "missing", "over", "text"] as const)
        tally[kind] += chunk.tallies[slot][kind];
    }
    for (const odd of chunk.odd) {
      if (this.odd.length < mostOdd)
        this.odd.push({ ...odd, row: odd.row + this.rows, byte: odd.byte + this.bytes });
      else if (odd.kind !== "beside") this.oddMore++;
    }
    this.oddMore += chunk.oddMore;
    if (this.nul < 0 && chunk.nul >= 0) this.nul = this.bytes + chunk.nul;
    this.rows += chunk.rows;
    this.bytes += bytes;
  }

  private room(column: number, rows: number): Float64Array {
    const held = this.values.get(column) as Float64Array<ArrayBuffer>;
    if (rows <= held.length) return held;
    const grown = new Float64Array(Math.ceil(rows * 1.3));
    grown.set(held.subarray(0, this.rows));
    this.values.set(column, grown);
    return grown;
  }

  /** The whole column. */
  column(column: number): Float64Array {
    const held = this.values.get(column);
    if (!held) throw new Error(`column ${column} is no value column`);
    return held.subarray(0, this.rows);
  }
}
