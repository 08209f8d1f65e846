import { median } from "../numeric/median.ts";

export interface ChangePoint {
  /** The first value of the new level. */
  index: number;
  before: number;
  after: number;
  /** Chance that a steady series shows as much. */
  probability: number;
}

/**
 * The one place where a series most likely changed its level, by ranks alone, so that no distribution is
 * assumed and one outlier does nothing (Pettitt, Applied Statistics 28, 1979). Medians before and after.
 * Null with fewer than eight values or when the chance of a steady series is above `significance`.
 */
export function changePoint(values: number[], significance = 0.01): ChangePoint | null {
  const n = values.length;
  if (n < 8) return null;
  const ranks = midRanks(values);
  let running = 0;
  let [largest, at] = [0, 0];
  for (let i = 0; i < n - 1; i++) {
    running += 2 * ranks[i] - (n + 1);
    if (Math.abs(running) > largest) [largest, at] = [Math.abs(running), i + 1];
  }
  const probability = Math.min(1, 2 * Math.exp((-6 * largest * largest) / (n * n * n + n * n)));
  if (probability > significance) return null;
  return { index: at, before: median(values.slice(0, at)), after: median(values.slice(at)), probability };
}

function midRanks(values: number[]): number[] {
  const order = values.map((_, i) => i).toSorted((a, b) => values[a] - values[b]);
  const ranks = values.map(() => 0);
  for (let from = 0; from < order.length;) {
    let to = from;
    while (to < order.length && values[order[to]] === values[order[from]]) to++;
    for (let k = from; k < to; k++) ranks[order[k]] = (from + to + 1) / 2;
    from = to;
  }
  return ranks;
}
