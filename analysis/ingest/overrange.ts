/**
 * Samples that carry no measurement: no number, infinite, or pinned at the screen's edge. A pinned
 * stretch is exactly flat at the record's extreme and begins and ends abruptly; a quantised natural peak
 * widens as the square root of the height below it, and a genuine level (ground, on-level, either level
 * of a gate) is where the signal rests.
 */
import { overSamples, stepSamples, type Steps } from "../steps.ts";
import type { Outline } from "./outline.ts";

export interface Usable {
  /** Pairs [from, to), sorted and apart. */
  unusable: Int32Array;
  overrange: number;
}

const shortestPinned = 3;
/** A level at which the signal spends more than this share of its time is a level, not a screen's edge. */
const mostPinned = 0.3;
/** Within this share of the range from zero an extreme is the ground level. */
const groundShare = 0.03;

/** Infinities among the samples become NaN. */
export function* findUnusable(samples: Float64Array, outline: Outline, lsb: number | null): Steps<Usable> {
  const { low, high, finite } = outline;
  const marks = new Marks(samples.length);
  let overrange = 0;
  if (finite < samples.length) {
    yield* overSamples(samples.length, (from, to) => markGaps(samples, marks, from, to));
    overrange += countGaps(samples, marks.bad, outline, yield* stretches(marks.bad));
  }
  if (high > low && !isTwoLevel(samples, outline))
    overrange += yield* markPinned(samples, marks, outline, lsb ?? (high - low) / 250);
  return { unusable: yield* stretches(marks.bad), overrange };
}

/** Samples without a number; infinities become NaN. */
function markGaps(samples: Float64Array, marks: Marks, from: number, to: number): void {
  for (let i = from; i < to; i++) {
    if (Number.isFinite(samples[i])) continue;
    marks.set(i, i + 1, samples[i] === samples[i] ? 2 : 1);
    samples[i] = NaN;
  }
}

/** Per sample 0 good, 1 missing, 2 over range; made only when there is something to mark. */
class Marks {
  bad = new Uint8Array(0);
  any = false;

  constructor(private readonly length: number) {}

  set(from: number, to: number, kind: 1 | 2): void {
    if (!this.any) this.bad = new Uint8Array(this.length);
    this.any = true;
    this.bad.fill(kind, from, to);
  }
}

/** Infinite samples are over range; so is a gap inside the record whose edge reaches for an extreme. */
function countGaps(samples: Float64Array, bad: Uint8Array, { low, high }: Outline, gaps: Int32Array): number {
  const near = 0.1 * (high - low);
  const atExtreme = (i: number) => samples[i] > high - near || samples[i] < low + near;
  let count = 0;
  for (let k = 0; k < gaps.length; k += 2) {
    const [from, to] = [gaps[k], gaps[k + 1]];
    const infinite = bad.subarray(from, to).includes(2);
    const inside = from > 0 && to < samples.length;
    count += infinite || (inside && (atExtreme(from - 1) || atExtreme(to))) ? to - from : 0;
  }
  return count;
}

/** Almost all samples rest at one of two levels: a gate or logic signal. */
function isTwoLevel(samples: Float64Array, { low, high, finite, stretch, extremes }: Outline): boolean {
  const [upper, lower] = [high - 0.08 * (high - low), low + 0.08 * (high - low)];
  let left = 0.05 * finite;
  for (let k = 0; 2 * k < extremes.length && left > 0; k++) {
    const [a, b] = [extremes[2 * k], extremes[2 * k + 1]];
    if (Math.min(a, b) >= upper || Math.max(a, b) <= lower) continue;
    const to = Math.min(samples.length, (k + 1) * stretch);
    for (let i = k * stretch; i < to; i++) if (samples[i] > lower && samples[i] < upper) left--;
  }
  return left > 0;
}

/** Marks pinned runs at both extremes; answers how many samples. */
function* markPinned(samples: Float64Array, marks: Marks, outline: Outline, lsb: number): Steps<number> {
  const { low, high, stretch, extremes } = outline;
  const span = high - low;
  const tolerance = Math.min(0.25 * lsb, 1e-6 * span);
  const [upper, lower] = [high - tolerance, low + tolerance];
  const edges = [new Edge(high, 1), new Edge(low, -1)];
  let done = 0;
  const visit = (from: number, to: number) => {
    for (let k = from; k < to; k++) {
      const [a, b] = [extremes[2 * k], extremes[2 * k + 1]];
      if (!(Math.max(a, b) >= upper || Math.min(a, b) <= lower)) continue;
      const end = Math.min(samples.length, (k + 1) * stretch);
      for (let i = nextBeyond(samples, Math.max(done, k * stretch), end, lower, upper); i < end;) {
        done = runAt(samples, i, edges[samples[i] >= upper ? 0 : 1], tolerance, lsb);
        i = nextBeyond(samples, done, end, lower, upper);
      }
    }
  };
  yield* overSamples(extremes.length / 2, visit, Math.ceil(stepSamples / stretch));
  let count = 0;
  for (const { level, total, runs } of edges) {
    if (Math.abs(level) < groundShare * span || total > mostPinned * samples.length) continue;
    for (const [from, to] of runs) {
      marks.set(from, to, 2);
      count += to - from;
    }
  }
  return count;
}

/** The first sample from here on that is at either edge; `to` without one. */
function nextBeyond(samples: Float64Array, from: number, to: number, lower: number, upper: number): number {
  let i = from;
  while (i < to && !(samples[i] >= upper || samples[i] <= lower)) i++;
  return i;
}

/** Adds the run of samples at this edge; answers its end. */
function runAt(samples: Float64Array, from: number, edge: Edge, tolerance: number, lsb: number): number {
  let end = from + 1;
  while (end < samples.length && Math.abs(samples[end] - edge.level) <= tolerance) end++;
  edge.total += end - from;
  if (end - from >= shortestPinned && isAbrupt(samples, from, end, edge, lsb)) edge.runs.push([from, end]);
  return end;
}

/** One extreme of the record: `side` +1 the highest, −1 the lowest. */
class Edge {
  total = 0;
  readonly runs: [number, number][] = [];

  constructor(
    readonly level: number,
    readonly side: 1 | -1,
  ) {}
}

/** Three levels below the edge the stretch is hardly wider than at it. */
function isAbrupt(samples: Float64Array, from: number, to: number, edge: Edge, lsb: number): boolean {
  const { side } = edge;
  const level = edge.level - side * 3.5 * lsb;
  const allowed = Math.max(1, 0.25 * (to - from));
  let wider = 0;
  for (let i = from - 1; i >= 0 && side * (samples[i] - level) >= 0; i--) if (++wider > allowed) return false;
  for (let i = to; i < samples.length && side * (samples[i] - level) >= 0; i++)
    if (++wider > allowed) return false;
  return true;
}

/** Where marked and unmarked samples meet. */
function* stretches(bad: Uint8Array): Steps<Int32Array> {
  const bounds: number[] = [];
  yield* overSamples(bad.length, (from, to) => {
    for (let i = from; i < to; i++) if ((bad[i] !== 0) !== (bounds.length % 2 === 1)) bounds.push(i);
  });
  if (bounds.length % 2 === 1) bounds.push(bad.length);
  return Int32Array.from(bounds);
}
