/** A linear scale from values to pixels, and round ticks on it. */
export interface Scale {
  (value: number): number;
  invert(pixel: number): number;
  from: number;
  to: number;
}

export function linear(from: number, to: number, pixelFrom: number, pixelTo: number): Scale {
  const span = to - from || 1;
  const scale = (value: number) => pixelFrom + ((value - from) / span) * (pixelTo - pixelFrom);
  const invert = (pixel: number) => from + ((pixel - pixelFrom) / (pixelTo - pixelFrom)) * span;
  return Object.assign(scale, { invert, from, to });
}

/** Multiples of 1, 2 or 5 · 10ⁿ inside [from, to], about `count` of them. */
export function ticks(from: number, to: number, count: number): number[] {
  if (!(to > from)) return [];
  const rough = (to - from) / count;
  const power = 10 ** Math.floor(Math.log10(rough));
  const step = power * ([1, 2, 5, 10].find((factor) => factor * power >= rough) ?? 10);
  const first = Math.ceil(from / step - 1e-9);
  const last = Math.floor(to / step + 1e-9);
  return Array.from({ length: last - first + 1 }, (_, at) => (first + at) * step);
}

export const clamp = (value: number, low: number, high: number) => Math.min(Math.max(value, low), high);
