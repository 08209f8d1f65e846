/** The ramp's figures and the saturation curve. */
import { useMemo } from "react";
import type { CoilSheet } from "../../app/bridge.ts";
import { figureText } from "../format/figure.ts";
import { Plot, type Ink } from "./Plot.tsx";

export function Ramp({ sheet: { ramp, saturation } }: { sheet: CoilSheet }) {
  const plot = useMemo(
    () =>
      saturation && {
        data: (ink: Ink) => [
          {
            x: saturation.x,
            y: saturation.y.map((inductance) => inductance * 1e3),
            mode: "lines" as const,
            line: { color: ink.ink, width: 1.5 },
          },
        ],
        x: "current, A",
        y: "incremental inductance, mH",
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
