/** Where one record ends and the next begins, judged from the time column; damaged times are mended first. */
import { ReadingError } from "../errors.ts";
import type { TimeColumn } from "./time-column.ts";

/** Rows [from, to) of one record; times in the column's own unit. */
export interface Span {
  from: number;
  to: number;
  first: number;
  last: number;
}

export interface Spans {
  spans: Span[];
  /** Times of all rows after mending; null where the column was too long to keep. */
  values: Float64Array | null;
  /** Rows whose time was out of line with its neighbours on both sides. */
  mended: number[];
  /** The column switched to a smaller unit where numbers fell below 1 (or the other way). */
  unitSwitches: number;
}

export function splitSpans(column: TimeColumn): Spans {
  const untouched = { mended: [], unitSwitches: 0 };
  if (column.regular) return { spans: spansBetween(column, [], null), values: null, ...untouched };
  const kept = column.values();
  if (!kept) {
    const joints = column.joints.filter(({ before, after }) => Math.abs(after - before) > column.largest);
    return {
      spans: spansBetween(
        column,
        joints.map(({ row }) => row),
        null,
      ),
      values: null,
      ...untouched,
    };
  }
  const mended = mendOutliers(kept, column.direction);
  const unitSwitches = undoUnitSwitches(kept);
  const joints = findJoints(kept);
  const spans = spansBetween(column, joints, kept);
  refusePackets(spans, kept);
  return { spans, values: kept, mended, unitSwitches };
}

/** One time out of line between two that fit each other: a damaged cell, not a joint. */
function mendOutliers(values: Float64Array, direction: number): number[] {
  const step = typicalStep(values);
  const mended: number[] = [];
  for (let i = 1; i + 1 < values.length; i++) {
    const [before, here, after] = [values[i - 1], values[i], values[i + 1]];
    const twoSteps = (after - before) * direction;
    const between = (here - before) * direction > -step && (after - here) * direction > -step;
    if (between || !(twoSteps > 0.5 * step && twoSteps < 3.5 * step)) continue;
    values[i] = (before + after) / 2;
    mended.push(i);
  }
  return mended;
}

/** The middle of the steps that are not zero, as a size: good for telling joints from steps, for nothing else. */
export function typicalStep(values: Float64Array): number {
  const stride = Math.max(1, Math.floor(values.length / 20_001));
  const steps: number[] = [];
  for (let i = stride; i < values.length; i += stride) {
    const step = Math.abs(values[i] - values[i - 1]);
    if (step > 0) steps.push(step);
  }
  steps.sort((a, b) => a - b);
  return steps[steps.length >> 1] ?? 0;
}

/**
 * "1.016, 1.006, 996.094, 986.328": the exporter wrote numbers below 1 in the next smaller unit and left
 * the unit out. The step grows by the same factor of 1000 as the numbers. All are put into the smaller unit.
 */
function undoUnitSwitches(values: Float64Array): number {
  let factor = 1;
  let switches = 0;
  let lowest = 1;
  const factors = new Float64Array(values.length).fill(1);
  for (let i = 2; i < values.length; i++) {
    factors[i] = factor;
    const step = values[i - 1] * factors[i - 1] - values[i - 2] * factors[i - 2];
    const jump = values[i] * factor - values[i - 1] * factors[i - 1];
    if (step === 0 || Math.abs(jump) < 50 * Math.abs(step)) continue;
    const other = [factor / 1000, factor * 1000].find((candidate) => {
      const moved = values[i] * candidate - values[i - 1] * factors[i - 1];
      const next = (values[i + 1] - values[i]) * candidate;
      return (
        moved / step > 0 && moved / step < 3 && (i + 1 >= values.length || Math.abs(next / step - 1) < 0.6)
      );
    });
    if (other === undefined) continue;
    factor = other;
    factors[i] = factor;
    lowest = Math.min(lowest, factor);
    switches++;
  }
  if (switches > 0) for (let i = 0; i < values.length; i++) values[i] *= Math.round(factors[i] / lowest);
  return switches;
}

/** Time goes back, by more than the jitter of a step. */
function findJoints(values: Float64Array): number[] {
  const step = typicalStep(values);
  let sum = 0;
  for (let i = 1; i < values.length; i++) sum += Math.sign(values[i] - values[i - 1]) || 0;
  const direction = Math.sign(sum) || 1;
  const joints: number[] = [];
  let last = values[0];
  for (let i = 1; i < values.length; i++) {
    if (values[i] !== values[i]) continue;
    if ((values[i] - last) * direction < -0.6 * step) joints.push(i);
    last = values[i];
  }
  return joints;
}

function spansBetween(column: TimeColumn, joints: number[], values: Float64Array | null): Span[] {
  // Rows without a time at the ends of the column have no place on it.
  const bounds = [column.firstRow, ...joints, column.lastRow + 1];
  const at = new Map(column.joints.map((joint) => [joint.row, joint]));
  return bounds.slice(1).map((to, i) => {
    const from = bounds[i];
    if (!values)
      return {
        from,
        to,
        first: at.get(from)?.after ?? column.first,
        last: at.get(to)?.before ?? column.last,
      };
    return filled(values, from, to);
  });
}

/** Without the rows at either end whose time is no number. */
function filled(values: Float64Array, from: number, to: number): Span {
  while (to - from > 1 && Number.isNaN(values[from])) from++;
  while (to - from > 1 && Number.isNaN(values[to - 1])) to--;
  return { from, to, first: values[from], last: values[to - 1] };
}

/** Packets of two or three rows that start over are no record of a waveform. */
function refusePackets(spans: Span[], values: Float64Array): void {
  if (spans.length < 3 || values.length / spans.length > 4) return;
  throw new ReadingError(
    "restarting-packets",
    `The time starts over after every ${Math.round(values.length / spans.length)} rows, so the file is not one record`,
    "Export the waveform of the record itself, with one continuous time column",
  );
}
