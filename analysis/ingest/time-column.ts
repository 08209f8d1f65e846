/**
 * A time column while it is read. Its values are judged, not kept: a long one leaves its ends, its
 * joints and an anchor every few thousand rows, so that memory goes to the channels alone.
 */

/** Rows up to which the values themselves are kept for a closer look. */
const keptRows = 4_000_000;
const anchorEvery = 4096;
const mostJoints = 100_000;

export interface Joint {
  /** First row after the joint. */
  row: number;
  before: number;
  after: number;
}

export class TimeColumn {
  rows = 0;
  first = NaN;
  last = NaN;
  /** +1 rising, −1 falling; from the first rows. */
  direction = 0;
  /** Where time goes against its direction. */
  readonly joints: Joint[] = [];
  jointsMore = 0;
  /** Every time stands exactly twice so far. */
  pairs = true;
  repeats = 0;
  missing = 0;
  readonly anchors: number[] = [];
  private kept: Float64Array | null = new Float64Array(1024);

  /** All values; null where there are too many to keep. */
  get values(): Float64Array | null {
    return this.kept?.subarray(0, this.rows) ?? null;
  }

  append(chunk: Float64Array): void {
    if (this.direction === 0) this.direction = directionOf(chunk);
    this.keep(chunk);
    const { direction } = this;
    let last = this.last;
    for (let i = 0; i < chunk.length; i++) {
      const value = chunk[i];
      const row = this.rows + i;
      if (row % anchorEvery === 0) this.anchors.push(value);
      if (value !== value) {
        this.missing++;
        this.pairs = false;
        continue;
      }
      if (last !== last) this.first = value;
      else {
        const step = (value - last) * direction;
        if (step < 0) this.join({ row, before: last, after: value });
        else if (step === 0) this.repeats++;
        if ((step === 0) !== (row % 2 === 1)) this.pairs = false;
      }
      last = value;
    }
    this.last = last;
    this.rows += chunk.length;
  }

  private join(joint: Joint): void {
    if (this.joints.length < mostJoints) this.joints.push(joint);
    else this.jointsMore++;
  }

  private keep(chunk: Float64Array): void {
    if (!this.kept) return;
    const rows = this.rows + chunk.length;
    if (rows > keptRows) this.kept = null;
    else if (rows > this.kept.length) {
      const grown = new Float64Array(Math.min(keptRows, Math.max(rows, 2 * this.kept.length)));
      grown.set(this.kept.subarray(0, this.rows));
      this.kept = grown;
    }
    this.kept?.set(chunk, this.rows);
  }
}

function directionOf(values: Float64Array): number {
  let sum = 0;
  for (let i = 1; i < values.length; i++)
    if (values[i] === values[i]) sum += Math.sign(values[i] - values[i - 1]) || 0;
  return Math.sign(sum);
}
