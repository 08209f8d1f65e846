/** Stretch and ticks of a curve's axis, in the one format of numbers. A logarithmic stretch is in powers of ten. */
import type { Data } from "plotly.js-dist-min";
import { ticks } from "../draw/scale.ts";
import { stated } from "../format/figure.ts";

export type Range = [number, number];

/** What all curves together cover, with some air. */
export function extentOf(data: Data[], name: "x" | "y", log: boolean): Range {
  let [low, high] = [Infinity, -Infinity];
  for (const curve of data)
    for (const value of (curve as Record<string, unknown>)[name] as (number | null)[]) {
      if (value === null || (log && value <= 0)) continue;
      [low, high] = [Math.min(low, value), Math.max(high, value)];
    }
  if (low > high) return [0, 1];
  if (log) return [Math.log10(low) - 0.02, Math.log10(high) + 0.02];
  const air = (high - low) * 0.06 || Math.abs(high) * 0.1 || 1;
  return [low - air, high + air];
}

export function axisTicks([from, to]: Range, unit: string, log: boolean) {
  const tickvals = log ? logTicks(from, to) : ticks(from, to, 6);
  return { tickmode: "array" as const, tickvals, ticktext: tickvals.map((value) => stated(value, unit)) };
}

/** 1, 2 and 5 of each power of ten; the powers alone over more than two of them. */
function logTicks(from: number, to: number): number[] {
  const factors = to - from > 2 ? [1] : [1, 2, 5];
  const values: number[] = [];
  for (let power = Math.floor(from); power <= Math.ceil(to); power++)
    for (const factor of factors) {
      const at = power + Math.log10(factor);
      if (at >= from && at <= to) values.push(Number(`${factor}e${power}`));
    }
  return values;
}
