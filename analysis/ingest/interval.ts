/**
 * The sample interval of a record: never the median step, but span/(n − 1), with what rounding of the
 * first and last time leaves open. Rounding to a quantum q has the standard uncertainty q/√12
 * (JCGM 100:2008, 4.3.7), at both ends.
 */
import type { Span } from "./spans.ts";
import { anchorEvery } from "./time-column.ts";
import { typicalStep } from "./spans.ts";

export interface MeasuredInterval {
  /** In the column's unit; positive. NaN where the rows are not evenly spaced. */
  step: number;
  uncertainty: number;
  /** Largest distance of a time from the straight line, in steps. */
  unevenness: number;
  /** Samples that are missing before these rows of the span (row counted from its first). */
  gaps: { row: number; missing: number }[];
}

const mostFilled = 0.2;

/**
 * `quantum`: the last digit's worth of the times as they are written. `values` of the whole column, or null
 * where only its anchors (every few thousandth time) were kept.
 */
export function measureInterval(
  span: Span,
  values: Float64Array | null,
  quantum: number,
  anchors: number[],
): MeasuredInterval {
  const rows = span.to - span.from;
  if (rows < 2) return { step: NaN, uncertainty: 0, unevenness: 0, gaps: [] };
  const gaps = values ? findGaps(values.subarray(span.from, span.to), quantum) : [];
  const samples = rows + gaps.reduce((sum, { missing }) => sum + missing, 0);
  const step = (span.last - span.first) / (samples - 1);
  const errors = values
    ? residuals(values.subarray(span.from, span.to), step, gaps)
    : anchorErrors(span, step, anchors);
  const uneven =
    errors.largest > Math.max(1.05 * quantum, 0.75 * Math.abs(step)) &&
    errors.largest > 1e-3 * Math.abs(span.last - span.first);
  const rounding = Math.max(quantum / Math.sqrt(12), errors.rms);
  return {
    step: uneven || step === 0 ? NaN : Math.abs(step),
    uncertainty: (Math.SQRT2 * rounding) / (samples - 1),
    unevenness: errors.largest / Math.abs(step),
    gaps,
  };
}

/** Rows that are gone: the time jumps by a whole number of steps where all others are one. */
function findGaps(values: Float64Array, quantum: number): { row: number; missing: number }[] {
  const step = typicalStep(values);
  if (!(step > 3 * quantum)) return [];
  const gaps: { row: number; missing: number }[] = [];
  let missing = 0;
  for (let i = 1; i < values.length; i++) {
    const steps = Math.abs(values[i] - values[i - 1]) / step;
    if (!(steps > 1.6)) continue;
    if (Math.abs(steps - Math.round(steps)) > 0.25 || gaps.length > 1000) return [];
    gaps.push({ row: i, missing: Math.round(steps) - 1 });
    missing += Math.round(steps) - 1;
  }
  return missing <= mostFilled * values.length ? gaps : [];
}

/** Distances from the straight line where only every few thousandth time was kept. */
function anchorErrors({ from, to, first }: Span, step: number, anchors: number[]) {
  let largest = 0;
  for (let k = Math.ceil(from / anchorEvery); k < anchors.length && k * anchorEvery < to; k++)
    largest = Math.max(largest, Math.abs(anchors[k] - first - (k * anchorEvery - from) * step) || 0);
  return { rms: 0, largest };
}

function residuals(values: Float64Array, step: number, gaps: { row: number; missing: number }[]) {
  let sum = 0;
  let count = 0;
  let largest = 0;
  let shift = 0;
  let next = 0;
  for (let i = 0; i < values.length; i++) {
    if (next < gaps.length && gaps[next].row === i) shift += gaps[next++].missing;
    const error = values[i] - values[0] - (i + shift) * step;
    if (error !== error) continue;
    sum += error * error;
    count++;
    largest = Math.max(largest, Math.abs(error));
  }
  return { rms: Math.sqrt(sum / Math.max(1, count)), largest };
}

/** What one unit in the last digit of a written number is worth: 5.62E-02 → 1e-4. */
export function lastDigit(text: string): number {
  const match = /^[^\d]*\d*[.,]?(\d*)(?:e([+-]?\d+))?/i.exec(text.trim());
  return match ? Number(`1e${Number(match[2] ?? 0) - match[1].length}`) : 0;
}
