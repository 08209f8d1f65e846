/** The added-capacitor line: 1/ω0² over the added capacitor; slope L, intercept the self-capacitance. */
import { useMemo } from "react";
import type { CoilSheet } from "../../app/bridge.ts";
import { figureText, stated } from "../format/figure.ts";
import { Plot, type Ink } from "./Plot.tsx";

type Line = NonNullable<CoilSheet["addedCapacitor"]>;

const addedAxis = { words: "added capacitor", unit: "F" };
const squareAxis = { words: "1/ω₀² in µs²", unit: "" };

export function AddedCapacitor({ line }: { line: CoilSheet["addedCapacitor"] }) {
  const plot = useMemo(
    () =>
      line &&
      line.inductance_H !== null && {
        data: (ink: Ink) => curves(line, ink),
        x: addedAxis,
        y: squareAxis,
        label: "Added-capacitor line",
      },
    [line],
  );
  return (
    <section aria-labelledby="line-title">
      <h2 id="line-title">Added-capacitor line</h2>
      {!line || !plot ? (
        <p className="quiet">
          {line?.reason ?? "It needs runs of this coil with at least two different capacitors."}
        </p>
      ) : (
        <>
          <p className="combined">
            <span>
              L <span className="tabular">{figureText(line.inductance_H, "H")}</span>
            </span>
            <span>
              self-capacitance <span className="tabular">{figureText(line.selfCapacitance_F, "F")}</span>
            </span>
            <span>
              series loss <span className="tabular">{figureText(line.seriesResistance_ohm, "Ω")}</span>
            </span>
            <span>
              parallel loss <span className="tabular">{figureText(line.parallelResistance_ohm, "Ω")}</span>
            </span>
          </p>
          {line.reason && <p className="quiet">{line.reason}</p>}
          <Plot {...plot} />
          <ul className="quiet">
            {line.points
              .filter((point) => point.flagged)
              .map((point) => (
                <li key={point.file}>
                  {point.file} ({stated(point.capacitance_F, "F")}) does not fit the line.
                </li>
              ))}
          </ul>
        </>
      )}
    </section>
  );
}

/** µs² in a s²: a prefix on a square would be read twice. */
const perSquare_us2 = 1e12;

function curves({ points, inductance_H, selfCapacitance_F }: Line, ink: Ink) {
  const x = points.map((point) => point.capacitance_F);
  const low = Math.min(0, ...x);
  const high = Math.max(...x) * 1.05;
  const at = (capacitance: number) =>
    (inductance_H?.value ?? 0) * (capacitance + (selfCapacitance_F?.value ?? 0)) * perSquare_us2;
  return [
    ...(inductance_H
      ? [
          {
            x: [low, high],
            y: [at(low), at(high)],
            mode: "lines" as const,
            line: { color: ink.fit, width: 2 },
            hoverinfo: "skip" as const,
          },
        ]
      : []),
    {
      x,
      y: points.map((point) => point.inverseSquare_s2.value * perSquare_us2),
      error_y: {
        type: "data" as const,
        array: points.map((point) => point.inverseSquare_s2.u * perSquare_us2),
        color: ink.faint,
      },
      mode: "markers" as const,
      marker: { size: 8, color: ink.ink, symbol: points.map((point) => (point.flagged ? "x" : "circle")) },
      text: points.map((point) => `${point.file}: ${stated(point.capacitance_F, "F")}`),
      hovertemplate: "%{text}<extra></extra>",
    },
  ];
}
