import { basename } from "node:path";
import { formatFigure, formatNumber } from "../../analysis/format/figure.ts";
import type { CaptureReading, PulseReading } from "../../analysis/reading-format.ts";
import type { Setup } from "../../analysis/setup/schema.ts";

/** A capture for people: a line, under it one per pulse, then what it could not tell or wants to know. */
export function captureText(file: string, reading: CaptureReading, setup: Setup): string {
  const pulses = reading.pulses.map((pulse) => `  ${pulseLine(pulse, setup)}`);
  const notes = reading.notes
    .filter(({ pulse }) => pulse === undefined)
    .map((note) => `    ${note.question ? `question: ${note.question} ` : ""}${note.text}`);
  return [captureHead(file, reading), ...pulses, ...notes].join("\n");
}

/** "pulse-01.csv  L 5.82 ± 0.04 mH  C 332 ± 9 nF  Q 21.3 ± 0.2  1 pulse, 1 spark" */
export function captureHead(file: string, { record, combined, pulses, run }: CaptureReading): string {
  const name = record.count > 1 ? `${basename(file)} [${record.index + 1}/${record.count}]` : basename(file);
  return [
    name,
    `L ${formatFigure(combined.inductance_H, "H")}`,
    `Q ${formatFigure(combined.q, "")}`,
    pulses.length === 0
      ? "no switch-off"
      : `sparks ${run.sparks} of ${run.pulses}${run.unclear > 0 ? `, ${run.unclear} unclear` : ""}`,
  ].join("  ");
}

function pulseLine(pulse: PulseReading, setup: Setup): string {
  const { ring, spark, ruled } = pulse;
  const parts = [
    `${String(pulse.index + 1).padStart(3)}`,
    `at ${formatNumber(pulse.switchOffTime_s, "s", 5)}`,
  ];
  if (pulse.dwell_s !== null) parts.push(`dwell ${formatNumber(pulse.dwell_s, "s")}`);
  parts.push(kickText(pulse, setup));
  const mode = ring?.modes[0];
  if (mode) parts.push(`ring ${formatFigure(mode.frequency_Hz, "Hz")} Q ${formatFigure(mode.q, "")}`);
  if (ring && ring.quality !== "good") parts.push(`ring ${ring.quality}: ${ring.reason}`);
  parts.push(spark ? `${spark.verdict} (${formatNumber(spark.confidence * 100, "%", 3)})` : "no verdict");
  if (ruled) parts.push(`ruled ${ruled.verdict}`);
  const reasons = spark?.reasons.join("; ");
  return reasons ? `${parts.join("  ")}: ${reasons}` : parts.join("  ");
}

function kickText({ peak_V, peakAtLeast_V, margin }: PulseReading, { switchRating_V }: Setup): string {
  if (peak_V === null)
    return peakAtLeast_V === undefined ? "kick –" : `kick over ${formatNumber(peakAtLeast_V, "V")}`;
  const kick = `kick ${formatNumber(peak_V, "V")}`;
  if (margin === null || !switchRating_V) return kick;
  const share = `${Math.round((1 - margin) * 100)} % of ${formatNumber(switchRating_V, "V")}`;
  return margin < 0.2 ? `${kick} (WARNING: ${share})` : `${kick} (${share})`;
}
