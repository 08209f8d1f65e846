/** The ramp's figures and the saturation curve. */
import { useMemo } from "react";
import type { CoilSheet } from "../../app/bridge.ts";
import { figureText, plain } from "../format/figure.ts";
import { Plot, type Ink } from "./Plot.tsx";

const currentAxis = { words: "current", unit: "A" };
const inductanceAxis = { words: "incremental inductance", unit: "H" };

export function Ramp({ sheet: { ramp, saturation } }: { sheet: CoilSheet }) {
  const plot = useMemo(
    () =>
      saturation && {
        data: (ink: Ink) => [
          {
            x: saturation.x,
            y: saturation.y,
            mode: "lines" as const,
            text: saturation.x.map(
              (current, at) => `${plain(current, "A")}: ${plain(saturation.y[at], "H")}`,
            ),
            hovertemplate: "%{text}<extra></extra>",
            line: { color: ink.ink, width: 1.5 },
          },
        ],
        x: currentAxis,
        y: inductanceAxis,
        label: "Incremental inductance against current",
      },
    [saturation],
  );
  return (
    <section aria-labelledby="ramp-title">
      <h2 id="ramp-title">Ramp and saturation</h2>
      {!ramp ? (
        <p className="quiet">It needs the coil current in a capture of this coil.</p>
      ) : (
        <p className="combined">
          <span>
            L <span className="tabular">{figureText(ramp.inductance_H, "H")}</span>
          </span>
          <span>
            R <span className="tabular">{figureText(ramp.resistance_ohm, "Ω")}</span>
          </span>
          <span>
            R at 20 °C <span className="tabular">{figureText(ramp.resistance20_ohm, "Ω")}</span>
          </span>
          <span>
            saturates at <span className="tabular">{figureText(ramp.saturationCurrent_A, "A")}</span>
          </span>
        </p>
      )}
      {ramp?.reason && <p className="quiet">{ramp.reason}</p>}
      {plot && <Plot {...plot} />}
    </section>
  );
}
