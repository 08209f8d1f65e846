import { formatNumber, formatStated } from "../../../analysis/format/figure.ts";
import type { PulseReading } from "../../../analysis/reading-format.ts";
import type { RingPicture, TraceWindow } from "../../bridge.ts";
import { html, Markup } from "./markup.ts";

const width = 640;
const height = 182;
/** Beside the trace: its scale; above it: words of its marks; below it: the time. */
const left = 46;
const head = 36;
const foot = 18;

/** A pulse as vectors: the trace in ink, the fitted ring over it, marks where the reading speaks of. */
export function pulseDrawing(trace: TraceWindow, ring: RingPicture | null, pulse: PulseReading): Markup {
  const values = [...trace.low, ...trace.high].filter((value) => value !== null);
  if (values.length === 0) return html`<p class="quiet">No sample of this pulse carries a measurement.</p>`;
  const [bottom, top] = [Math.min(...values), Math.max(...values)];
  const span = top - bottom || 1;
  const x = (time: number) => left + ((time - trace.from_s) / (trace.to_s - trace.from_s)) * (width - left);
  const y = (value: number) => head + 4 + (1 - (value - bottom) / span) * (height - head - foot - 8);
  const inside = (time: number) => time >= trace.from_s && time <= trace.to_s;
  const fitted = ring?.fitted ?? { time_s: [], value: [] };
  return html`<svg viewBox="0 0 ${width} ${height}" role="img" aria-label="Trace of pulse ${pulse.index + 1}">
    <text x="0" y="10">${trace.name}</text>
    ${scale(bottom, top, trace.unit, y)} ${level(pulse, trace, y)}
    <path class="ink" d="${envelopePath(trace, x, y)}" />
    <path class="fit" d="${linePath(fitted.time_s, fitted.value, x, y)}" />
    ${marks(pulse)
      .filter(({ time }) => inside(time))
      .map(({ time, word, kind }, i) => mark(x(time), word, kind, i))}
    <text x="${left}" y="${height - 4}">${formatNumber(trace.from_s, "s", 5)}</text>
    <text x="${width}" y="${height - 4}" text-anchor="end">${formatNumber(trace.to_s, "s", 5)}</text>
  </svg>`;
}

/** Three to six values at round steps, so that the trace can be read without the tables. */
function scale(bottom: number, top: number, unit: string, y: (value: number) => number): Markup[] {
  const rough = (top - bottom || 1) / 4;
  const power = 10 ** Math.floor(Math.log10(rough));
  const step = [1, 2, 5, 10].map((factor) => factor * power).find((candidate) => candidate >= rough)!;
  const first = Math.ceil(bottom / step);
  const count = Math.floor(top / step) - first + 1;
  return Array.from({ length: count }, (_, i) => {
    const value = (first + i) * step;
    return html`<line class="grid" x1="${left}" x2="${width}" y1="${y(value)}" y2="${y(value)}" />
      <text x="${left - 5}" y="${y(value) + 4}" text-anchor="end">${formatStated(value, unit)}</text>`;
  });
}

function level(pulse: PulseReading, trace: TraceWindow, y: (value: number) => number): Markup {
  const peak = pulse.peak_V;
  if (peak === null || trace.unit !== "V") return html``;
  const top = Math.max(...trace.high.filter((value) => value !== null));
  if (peak > top) return html``;
  return html`<line class="rule" x1="${left}" x2="${width}" y1="${y(peak)}" y2="${y(peak)}" />
    <text x="${width}" y="${y(peak) - 4}" text-anchor="end">kick ${formatNumber(peak, "V")}</text>`;
}

interface Mark {
  time: number;
  word: string;
  kind: "quiet" | "spark";
}

function marks({ switchOffTime_s, spark }: PulseReading): Mark[] {
  const found: Mark[] = [];
  if (switchOffTime_s !== null) found.push({ time: switchOffTime_s, word: "switch-off", kind: "quiet" });
  if (spark?.verdict !== "spark") return found;
  if (spark.onset_s !== null) found.push({ time: spark.onset_s, word: "spark", kind: "spark" });
  if (spark.extinction_s !== null) found.push({ time: spark.extinction_s, word: "out", kind: "spark" });
  return found;
}

/** Words stand above the trace, those of marks that lie close together above each other. */
const mark = (at: number, word: string, kind: string, row: number) =>
  html`<line class="${kind}" x1="${at}" x2="${at}" y1="${head - 11 * row - 11}" y2="${height - foot}" />
    <text class="${kind}" x="${at + 3}" y="${head - 11 * row - 2}">${word}</text>`;

/** Up along the highest samples, back along the lowest: no spike is lost, whatever the scale. */
function envelopePath(trace: TraceWindow, x: (time: number) => number, y: (value: number) => number): string {
  const points: string[] = [];
  for (const [i, time] of trace.time_s.entries()) {
    const [low, high] = [trace.low[i], trace.high[i]];
    if (low === null || high === null) continue;
    points.push(`${x(time).toFixed(1)} ${y(low).toFixed(1)}`);
    if (high !== low) points.push(`${x(time).toFixed(1)} ${y(high).toFixed(1)}`);
  }
  return points.length === 0 ? "" : `M${points.join("L")}`;
}

function linePath(
  times: number[],
  values: number[],
  x: (t: number) => number,
  y: (v: number) => number,
): string {
  const points = times.map((time, i) => `${x(time).toFixed(1)} ${y(values[i]).toFixed(1)}`);
  return points.length === 0 ? "" : `M${points.join("L")}`;
}
