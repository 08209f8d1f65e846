/** Thinned samples as a pen line, and the skyline that leaders keep clear of. */
import type { TraceWindow } from "../../app/bridge.ts";
import type { Scale } from "./scale.ts";

type Samples = Pick<TraceWindow, "time_s" | "low" | "high">;

const digits = (value: number) => Math.round(value * 10) / 10;

/** An SVG path: in each slot the pen goes through lowest and highest, entering at the nearer end. */
export function inkPath({ time_s, low, high }: Samples, x: Scale, y: Scale): string {
  let path = "";
  let pen: number | null = null;
  for (let at = 0; at < time_s.length; at++) {
    const a = low[at];
    const b = high[at];
    if (a === null || b === null) {
      pen = null;
      continue;
    }
    const px = digits(x(time_s[at]));
    const ya = digits(y(a));
    const yb = digits(y(b));
    const turned: boolean = pen !== null && Math.abs(yb - pen) < Math.abs(ya - pen);
    const first: number = turned ? yb : ya;
    const last: number = turned ? ya : yb;
    path += `${pen === null ? "M" : "L"}${px} ${first}`;
    if (last !== first) path += `V${last}`;
    pen = last;
  }
  return path;
}

export function linePath(time_s: number[], value: (number | null)[], x: Scale, y: Scale): string {
  return inkPath({ time_s, low: value, high: value }, x, y);
}

/** Highest and lowest ink in each pixel column of the plot. */
export interface Skyline {
  top: Float64Array;
  bottom: Float64Array;
}

export function skyline(width: number, traces: Samples[], x: Scale, y: Scale): Skyline {
  const columns = Math.max(Math.ceil(width), 1);
  const top = new Float64Array(columns).fill(Infinity);
  const bottom = new Float64Array(columns).fill(-Infinity);
  const mark = (from: number, to: number, pixel: number) => {
    for (let column = Math.max(from, 0); column <= Math.min(to, columns - 1); column++) {
      top[column] = Math.min(top[column], pixel);
      bottom[column] = Math.max(bottom[column], pixel);
    }
  };
  for (const { time_s, low, high } of traces) {
    let before: number | null = null;
    for (let at = 0; at < time_s.length; at++) {
      const column = Math.floor(x(time_s[at]));
      // Between two slots the pen covers both columns' levels.
      for (const value of [low[at], high[at]]) if (value !== null) mark(before ?? column, column, y(value));
      before = column;
    }
  }
  return { top, bottom };
}
