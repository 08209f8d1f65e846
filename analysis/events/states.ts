/**
 * The two states of a digital-like trace and its transitions: levels by histogram mode, instants at
 * the 50 % level with hysteresis at 30 and 70 % (IEEE Std 181-2011, 5.2 and 5.3).
 */

export interface States {
  low: number;
  high: number;
}

export interface Transition {
  /** Fractional sample number. */
  at: number;
  u: number;
  rising: boolean;
}

const BINS = 256;

/** Null where the trace has no two separate states. */
export function statesOf(samples: Float64Array): States | null {
  let low = Infinity;
  let high = -Infinity;
  for (const y of samples) {
    if (y < low && y > -Infinity) low = y;
    if (y > high && y < Infinity) high = y;
  }
  if (!(high > low)) return null;
  const counts = new Float64Array(BINS);
  const sums = new Float64Array(BINS);
  for (const y of samples) {
    if (!Number.isFinite(y)) continue;
    const bin = Math.min(BINS - 1, Math.floor(((y - low) / (high - low)) * BINS));
    counts[bin]++;
    sums[bin] += y;
  }
  const mode = (from: number, to: number) => {
    let best = from;
    for (let b = from; b < to; b++) if (counts[b] > counts[best]) best = b;
    return counts[best] > 0 ? sums[best] / counts[best] : null;
  };
  const lowState = mode(0, BINS / 2);
  const highState = mode(BINS / 2, BINS);
  if (lowState === null || highState === null || !(highState - lowState > 0.3 * (high - low))) return null;
  return { low: lowState, high: highState };
}

export function transitionsOf(samples: Float64Array, { low, high }: States): Transition[] {
  const span = high - low;
  const middle = low + span / 2;
  const found: Transition[] = [];
  let state: boolean | null = null;
  let crossed = 0;
  let last = -1;
  for (let i = 0; i < samples.length; i++) {
    const y = samples[i];
    if (!Number.isFinite(y)) continue;
    const before = samples[last];
    if (last >= 0 && y >= middle !== before >= middle)
      crossed = last + ((middle - before) / (y - before)) * (i - last);
    last = i;
    if (y > low + 0.7 * span && state !== true) {
      if (state === false) found.push({ at: crossed, u: 0.29, rising: true });
      state = true;
    } else if (y < low + 0.3 * span && state !== false) {
      if (state === true) found.push({ at: crossed, u: 0.29, rising: false });
      state = false;
    }
  }
  return found;
}
