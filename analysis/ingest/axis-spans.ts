/** The records along one time axis, and the stretch of a channel that belongs to each. */
import type { AxisGroup } from "./axes.ts";
import type { Columns } from "./columns.ts";
import { lastDigit, measureInterval } from "./interval.ts";
import type { Layout } from "./layout.ts";
import { readNumber } from "./number.ts";
import { splitSpans, type Span } from "./spans.ts";
import type { TimeColumn } from "./time-column.ts";
import type { RecordTime } from "./time-base.ts";

export function axisSpans(layout: Layout, columns: Columns, group: AxisGroup): RecordTime[] {
  const rows = columns.rows;
  if (group.axis === null) return [withoutAxis(layout, rows)];
  const column = columns.times.get(group.axis)!;
  const name = layout.names.get(group.axis) ?? null;
  const common = { name, axis: true, counterFrom: null };
  if (column.pairs && rows >= 6) {
    // A file cut between the two of a pair ends one row and one step later: that row is left out.
    const [pairs, times] = [Math.floor(rows / 2), Math.ceil(rows / 2)];
    const step = Math.abs(column.last - column.first) / (times - 1);
    const last = column.last - (times - pairs) * column.direction * step;
    const span = { from: 0, to: 2 * pairs, first: column.first, last };
    const quantum = quantumOf(layout, group.axis, columns, span);
    const uncertainty = quantum / Math.sqrt(6) / (times - 1);
    return [
      {
        ...common,
        ...span,
        pairs: true,
        reversed: false,
        measured: { step, uncertainty, unevenness: 0, gaps: [] },
        quantum,
        mended: 0,
        unitSwitches: 0,
      },
    ];
  }
  const { spans, values, mended, unitSwitches } = splitSpans(column);
  return spans
    .filter(({ from, to }) => to - from >= 2)
    .map((span) => {
      const quantum = quantumOf(layout, group.axis!, columns, span);
      const even = measureInterval(span, values, quantum, column.anchors);
      const measured = isBrokenPairs(column, quantum) ? { ...even, step: NaN } : even;
      const inSpan = mended.filter((row) => row >= span.from && row < span.to).length;
      return {
        ...common,
        ...span,
        pairs: false,
        reversed: span.last < span.first,
        measured,
        quantum,
        mended: inSpan,
        unitSwitches,
      };
    });
}

/**
 * About every time twice, though the digits could tell the two apart: envelope pairs of which some rows are
 * lost, not rounding. Rows then tell nothing of the interval: span/(n − 1) would be half of it.
 */
const isBrokenPairs = ({ rows, repeats, smallest }: TimeColumn, quantum: number) =>
  Math.abs(repeats - rows / 2) < 0.05 * rows && smallest > 3 * quantum;

/** No time in the data: the whole is one record. */
export function withoutAxis({ axes }: Layout, rows: number): RecordTime {
  return {
    name: null,
    axis: false,
    counterFrom: axes.counter === null ? null : axes.counterFrom,
    from: 0,
    to: rows,
    first: NaN,
    last: NaN,
    pairs: false,
    reversed: false,
    measured: null,
    quantum: 0,
    mended: 0,
    unitSwitches: 0,
  };
}

/** The coarser of the last digits at both ends: writers that keep significant digits lose them as time grows. */
function quantumOf(layout: Layout, axis: number, columns: Columns, span: Span): number {
  const head = layout.axisText.get(axis) ?? [];
  const tail = columns.tail.map((cells) => cells[axis] ?? "");
  return Math.max(finest(head.slice(0, 40), layout, span.first), finest(tail.slice(-40), layout, span.last));
}

/** Writers may strip zeros: the finest last digit among neighbours of like size is the column's. */
function finest(cells: string[], { dialect }: Layout, end: number): number {
  let quantum = Infinity;
  for (const cell of cells) {
    const value = readNumber(cell.trim(), dialect.format);
    if (!value || Math.abs(value) < Math.abs(end) / 20) continue;
    quantum = Math.min(quantum, lastDigit(cell));
  }
  return Number.isFinite(quantum) ? quantum : 0;
}

/** Above this a record keeps its place in the column's memory. */
const copiedRows = 65_536;

/** A channel's samples in this record, in rising time, with NaN where rows are gone; a long one in place. */
export function stretchOf(values: Float64Array, { from, to, measured, reversed }: RecordTime): Float64Array {
  const part = to - from > copiedRows ? values.subarray(from, to) : values.slice(from, to);
  const gaps = measured?.gaps ?? [];
  const filled = gaps.length > 0 ? fill(part, gaps) : part;
  if (reversed) filled.reverse();
  return filled;
}

function fill(values: Float64Array, gaps: { row: number; missing: number }[]): Float64Array {
  const total = gaps.reduce((sum, { missing }) => sum + missing, values.length);
  const filled = new Float64Array(total).fill(NaN);
  let from = 0;
  let shift = 0;
  for (const { row, missing } of [...gaps, { row: values.length, missing: 0 }]) {
    filled.set(values.subarray(from, row), from + shift);
    from = row;
    shift += missing;
  }
  return filled;
}
