/** The files of the run, what each gave, and what could not be read. */
import { memo, useMemo } from "react";
import type { PulseRow, RunDetail } from "../../app/bridge.ts";
import { finalVerdict } from "../draw/glyph.ts";
import { fileName, plural } from "../format/words.ts";
import { hrefOf } from "../state/route.ts";

export const Captures = memo(function Captures({ detail, rows }: { detail: RunDetail; rows: PulseRow[] }) {
  const byCapture = useMemo(() => grouped(rows), [rows]);
  const { captureRows, run } = detail;
  return (
    <section className="captures" aria-labelledby="captures-title">
      <h2 id="captures-title">{plural(captureRows.length, "capture")}</h2>
      <ul className={captureRows.length > 100 ? "long" : undefined}>
        {captureRows.map((row) => {
          const pulses = byCapture.get(row.capture) ?? [];
          const record =
            row.record.count > 1 ? ` (record ${row.record.index + 1} of ${row.record.count})` : "";
          return (
            <li key={row.capture}>
              {pulses[0] ? (
                <a href={hrefOf({ view: "pulse", run, capture: row.capture, pulse: pulses[0].pulse })}>
                  {fileName(row.file)}
                  {record}
                </a>
              ) : (
                <span>
                  {fileName(row.file)}
                  {record}
                </span>
              )}
              <span className="dots" aria-hidden="true" />
              <span className={row.error ? "problem" : "quiet"}>
                {row.error ?? verdicts(pulses, row.pulses)}
              </span>
            </li>
          );
        })}
      </ul>
    </section>
  );
});

function grouped(rows: PulseRow[]): Map<number, PulseRow[]> {
  const groups = new Map<number, PulseRow[]>();
  for (const row of rows) {
    const group = groups.get(row.capture);
    if (group) group.push(row);
    else groups.set(row.capture, [row]);
  }
  return groups;
}

function verdicts(pulses: PulseRow[], count: number): string {
  if (count === 0) return "no switch-off found";
  const of = (verdict: string) => pulses.filter((row) => finalVerdict(row) === verdict).length;
  const parts = [
    of("spark") > 0 ? `${of("spark")} sparked` : "",
    of("no-spark") > 0 ? `${of("no-spark")} without` : "",
    of("unclear") > 0 ? `${of("unclear")} unclear` : "",
  ];
  return [plural(count, "pulse"), ...parts].filter(Boolean).join(", ");
}
