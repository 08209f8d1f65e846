/** Standard errors that make a difference between the slopes of two stretches. */
const STEEPER = 6;

/**
 * Whether the current grows faster somewhere than before: through a constant inductance it never does,
 * whatever else the ramp holds (the secondary's ringing after switch-on averages out of a long stretch).
 */
export function steepens(values: Float64Array, stretches: number): boolean {
  const length = Math.floor(values.length / stretches);
  if (length < 4) return false;
  let least: Line | null = null;
  for (let from = 0; from + length <= values.length; from += length) {
    const line = lineOf(values.subarray(from, from + length));
    if (least && line.slope - least.slope > STEEPER * Math.hypot(line.error, least.error)) return true;
    if (!least || line.slope < least.slope) least = line;
  }
  return false;
}

interface Line {
  slope: number;
  /** Standard error by the scatter about the line itself. */
  error: number;
}

function lineOf(values: Float64Array): Line {
  const n = values.length;
  const middle = (n - 1) / 2;
  const mean = values.reduce((sum, value) => sum + value, 0) / n;
  const spread = (n * (n * n - 1)) / 12;
  const slope = values.reduce((sum, value, k) => sum + (k - middle) * value, 0) / spread;
  const scatter = values.reduce((sum, value, k) => sum + (value - mean - slope * (k - middle)) ** 2, 0);
  return { slope, error: Math.sqrt(scatter / (n - 2) / spread) };
}
