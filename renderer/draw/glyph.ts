/** A pulse as handwriting: the drawn envelope of its ring, and the mark of its verdict. */
import type { PulseRow } from "../../app/bridge.ts";
import type { Verdict } from "../../analysis/reading-format.ts";

export interface GlyphBox {
  x: number;
  /** The baseline. */
  y: number;
  width: number;
  /** From the baseline to the highest stroke. */
  height: number;
}

const r = (value: number) => Math.round(value * 10) / 10;

export const finalVerdict = (row: Pick<PulseRow, "verdict" | "ruled">): Verdict | null =>
  row.ruled ?? row.verdict;

/** Upstroke, the envelope down to the baseline, mirrored below; broken where a spark struck. */
export function glyphPath(row: PulseRow, { x, y, width, height }: GlyphBox): string {
  const { sketch, sketchOnset } = row;
  if (sketch.length < 2) return `M${r(x)} ${r(y - 2)}V${r(y + 2)}`;
  const step = width / (sketch.length - 1);
  const points = sketch.map((level, at) => [x + at * step, (level > 0 ? Math.min(level, 1) : 0) * height]);
  const cut = sketchOnset === null ? points.length - 1 : Math.round(sketchOnset * (points.length - 1));
  const whole = points.slice(0, Math.max(cut, 0) + 1);
  return outline(whole, y) + tail(points.slice(cut + 1), y);
}

/** A closed shape: up the first stroke, along the envelope, down its end and back below. */
function outline(points: number[][], y: number): string {
  const above = points.map(([px, h]) => `${r(px)} ${r(y - h)}`);
  const below = points.toReversed().map(([px, h]) => `${r(px)} ${r(y + h)}`);
  return `M${above.join("L")}L${below.join("L")}Z`;
}

/** What is left after the spark: two thin strokes that start after a gap. */
function tail(points: number[][], y: number): string {
  if (points.length < 3) return "";
  const rest = points.slice(1);
  const line = (sign: number) => `M${rest.map(([px, h]) => `${r(px)} ${r(y + sign * h)}`).join("L")}`;
  return line(-1) + line(1);
}

export const lozengePath = (x: number, y: number, size: number) =>
  `M${r(x)} ${r(y - size * 1.35)}L${r(x + size)} ${r(y)}L${r(x)} ${r(y + size * 1.35)}L${r(x - size)} ${r(y)}Z`;

export const circlePath = (x: number, y: number, radius: number) =>
  `M${r(x - radius)} ${r(y)}a${radius} ${radius} 0 1 0 ${2 * radius} 0a${radius} ${radius} 0 1 0 ${-2 * radius} 0Z`;

/** A question mark as strokes, so that it needs no font at any size. */
export const questionPath = (x: number, y: number, s: number) =>
  `M${r(x - s)} ${r(y - s)}a${s} ${s} 0 1 1 ${r(s * 1.5)} ${r(s * 0.85)}` +
  `q${r(-s * 0.5)} ${r(s * 0.35)} ${r(-s * 0.5)} ${r(s * 0.95)}M${r(x)} ${r(y + s * 1.7)}v${r(s * 0.25)}`;
