/**
 * Samples that carry no measurement: no number, infinite, or pinned at the screen's edge. A pinned
 * stretch is exactly flat at the record's extreme and begins and ends abruptly; a quantised natural peak
 * widens as the square root of the height below it, and a genuine level (ground, on-level, either level
 * of a gate) is where the signal rests.
 */
export interface Usable {
  /** Infinities made NaN, in place. */
  samples: Float64Array;
  /** Pairs [from, to), sorted and apart. */
  unusable: Int32Array;
  overrange: number;
  lsb: number | null;
}

const shortestPinned = 3;
/** A level at which the signal spends more than this share of its time is a level, not a screen's edge. */
const mostPinned = 0.3;
/** Within this share of the range from zero an extreme is the ground level. */
const groundShare = 0.03;

export function findUnusable(samples: Float64Array, lsb: number | null): Usable {
  const range = extremes(samples);
  const marks = new Marks(samples.length);
  let overrange = 0;
  if (range.finite < samples.length) {
    for (let i = 0; i < samples.length; i++) {
      if (Number.isFinite(samples[i])) continue;
      marks.set(i, i + 1, samples[i] === samples[i] ? 2 : 1);
      samples[i] = NaN;
    }
    overrange += countGaps(samples, marks.bad, range);
  }
  const step = lsb ?? (range.high - range.low) / 250;
  if (range.high > range.low && !isTwoLevel(samples, range)) {
    overrange += markPinned(samples, marks, step, range);
  }
  return { samples, unusable: marks.any ? stretches(marks.bad) : new Int32Array(0), overrange, lsb };
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

interface Range {
  low: number;
  high: number;
  finite: number;
}

function extremes(samples: Float64Array): Range {
  let [low, high, finite] = [Infinity, -Infinity, 0];
  for (let i = 0; i < samples.length; i++) {
    const value = samples[i];
    if (value - value !== 0) continue;
    finite++;
    if (value < low) low = value;
    if (value > high) high = value;
  }
  return { low, high, finite };
}

/** Infinite samples are over range; so is a gap inside the record whose edge reaches for an extreme. */
function countGaps(samples: Float64Array, bad: Uint8Array, { low, high }: Range): number {
  const near = 0.1 * (high - low);
  const atExtreme = (i: number) =>
    i >= 0 && i < samples.length && (samples[i] > high - near || samples[i] < low + near);
  let count = 0;
  for (let i = 0; i < samples.length; i++) {
    if (!bad[i]) continue;
    let end = i;
    let infinite = 0;
    for (; end < samples.length && bad[end]; end++) if (bad[end] === 2) infinite++;
    const inside = i > 0 && end < samples.length;
    count += infinite || (inside && (atExtreme(i - 1) || atExtreme(end)) ? end - i : 0);
    i = end;
  }
  return count;
}

/** Almost all samples rest at one of two levels: a gate or logic signal. */
function isTwoLevel(samples: Float64Array, { low, high, finite }: Range): boolean {
  const near = 0.08 * (high - low);
  let left = 0.05 * finite;
  for (let i = 0; i < samples.length && left > 0; i++)
    if (samples[i] > low + near && samples[i] < high - near) left--;
  return left > 0;
}

/** Marks pinned runs at both extremes; answers how many samples. */
function markPinned(samples: Float64Array, marks: Marks, lsb: number, { low, high }: Range): number {
  const span = high - low;
  const tolerance = Math.min(0.25 * lsb, 1e-6 * span);
  const edges = [new Edge(high, 1), new Edge(low, -1)];
  for (let i = 0; i < samples.length; i++) {
    const value = samples[i];
    if (value < high - tolerance && value > low + tolerance) continue;
    const edge = value >= high - tolerance ? edges[0] : value <= low + tolerance ? edges[1] : null;
    if (!edge) continue;
    let end = i + 1;
    while (end < samples.length && Math.abs(samples[end] - edge.level) <= tolerance) end++;
    edge.total += end - i;
    if (end - i >= shortestPinned && isAbrupt(samples, i, end, edge, lsb)) edge.runs.push([i, end]);
    i = end - 1;
  }
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

function stretches(bad: Uint8Array): Int32Array {
  const pairs: number[] = [];
  for (let i = 0; i < bad.length; i++) {
    if (!bad[i]) continue;
    const from = i;
    while (i < bad.length && bad[i]) i++;
    pairs.push(from, i);
  }
  return Int32Array.from(pairs);
}
