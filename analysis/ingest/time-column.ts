/**
 * A time column while it is read. Its values are judged, not kept: a long one leaves its ends, its
 * joints and an anchor every few thousand rows, so that memory goes to the channels alone.
 */

/** Rows up to which the values themselves are kept for a closer look. */
const keptRows = 1_000_000;
export const anchorEvery = 4096;
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
  /** Rows of these two: cells without a number may stand before and after them. */
  firstRow = 0;
  lastRow = 0;
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
  /** Smallest and largest step, zero apart, as sizes. */
  smallest = Infinity;
  largest = 0;
  private kept: Float64Array[] | null = [];

  /** One record on an even grid: nothing to mend, to split or to fill. */
  get regular(): boolean {
    const joined = this.joints.length + this.missing + this.repeats > 0;
    return this.rows > 2 && !joined && this.largest <= 1.5 * this.smallest;
  }

  /** A copy of all values; null where there are too many to keep. */
  values(): Float64Array | null {
    if (!this.kept) return null;
    const whole = new Float64Array(this.rows);
    let at = 0;
    for (const chunk of this.kept) {
      whole.set(chunk, at);
      at += chunk.length;
    }
    return whole;
  }

  append(chunk: Float64Array): void {
    if (this.direction === 0) this.direction = directionOf(chunk);
    if (this.rows + chunk.length > keptRows) this.kept = null;
    this.kept?.push(chunk.slice());
    const { direction } = this;
    let { last, lastRow, smallest, largest, pairs } = this;
    for (let i = 0; i < chunk.length; i++) {
      const value = chunk[i];
      const step = (value - last) * direction;
      const before = last;
      if (pairs) pairs = value === value && (step === 0) === ((this.rows + i) % 2 === 1);
      if (value !== value) {
        this.missing++;
        continue;
      }
      last = value;
      lastRow = this.rows + i;
      if (step > 0) {
        if (step < smallest) smallest = step;
        if (step > largest) largest = step;
      } else if (step === 0) this.repeats++;
      else if (step < 0) this.join({ row: this.rows + i, before, after: value });
      else {
        this.first = value;
        this.firstRow = lastRow;
      }
    }
    for (
      let row = Math.ceil(this.rows / anchorEvery) * anchorEvery;
      row < this.rows + chunk.length;
      row += anchorEvery
    )
      this.anchors.push(chunk[row - this.rows]);
    Object.assign(this, { last, lastRow, smallest, largest, pairs });
    this.rows += chunk.length;
  }

  private join(joint: Joint): void {
    if (this.joints.length < mostJoints) this.joints.push(joint);
    else this.jointsMore++;
  }
}

function directionOf(values: Float64Array): number {
  let sum = 0;
  for (let i = 1; i < values.length; i++)
    if (values[i] === values[i]) sum += Math.sign(values[i] - values[i - 1]) || 0;
  return Math.sign(sum);
}
