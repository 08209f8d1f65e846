/** How long to conduct for a current: against supply voltage and winding temperature. */
import { useMemo } from "react";
import type { CoilSheet } from "../../app/bridge.ts";
import { figureText, plain, stated } from "../format/figure.ts";
import { Plot, type Ink } from "./Plot.tsx";

const supplyAxis = { words: "supply", unit: "V" };
const dwellAxis = { words: "dwell", unit: "s" };

export function DwellTable({ dwell }: { dwell: CoilSheet["dwell"] }) {
  const plot = useMemo(
    () =>
      dwell && {
        data: (ink: Ink) => curves(dwell, ink),
        x: supplyAxis,
        y: dwellAxis,
        label: "Dwell against supply voltage, a curve for each temperature",
      },
    [dwell],
  );
  return (
    <section aria-labelledby="dwell-title">
      <h2 id="dwell-title">Dwell</h2>
      {!dwell || !plot ? (
        <p className="quiet">It needs L and R from the ramp: record the coil current and state the supply.</p>
      ) : (
        <>
          <p>
            Time to reach {plain(dwell.current_A, "A")}, by supply and winding temperature. A dash: the
            current is never reached.
          </p>
          <div className="wide-table">
            <table>
              <thead>
                <tr>
                  <th scope="col">supply</th>
                  {dwell.temperatures_C.map((temperature) => (
                    <th key={temperature} scope="col">
                      {stated(temperature, "°C")}
                    </th>
                  ))}
                </tr>
              </thead>
              <tbody>
                {dwell.supplies_V.map((supply, row) => (
                  <tr key={supply}>
                    <th scope="row">{stated(supply, "V")}</th>
                    {dwell.time_s[row].map((time, column) => (
                      <td key={dwell.temperatures_C[column]} className="tabular">
                        {figureText(time, "s")}
                      </td>
                    ))}
                  </tr>
                ))}
              </tbody>
            </table>
          </div>
          <Plot {...plot} />
        </>
      )}
    </section>
  );
}

const dashes = ["solid", "dash", "dot", "dashdot", "longdash"] as const;

function curves(dwell: NonNullable<CoilSheet["dwell"]>, ink: Ink) {
  return dwell.temperatures_C.map((temperature, column) => ({
    x: dwell.supplies_V,
    y: dwell.time_s.map((row) => row[column]?.value ?? null),
    mode: "text+lines+markers" as const,
    // The outer curves are named where they start, the ones between by pointing at them.
    text: [column === 0 || column === dwell.temperatures_C.length - 1 ? stated(temperature, "°C") : ""],
    textposition: column === 0 ? ("bottom left" as const) : ("top right" as const),
    cliponaxis: false,
    line: { color: ink.ink, width: 1.5, dash: dashes[column % dashes.length] },
    marker: { size: 5, color: ink.ink },
    customdata: dwell.supplies_V.map(
      (supply, row) => `${stated(supply, "V")}: ${plain(dwell.time_s[row][column]?.value, "s")}`,
    ),
    hovertemplate: `${stated(temperature, "°C")}, %{customdata}<extra></extra>`,
  }));
}
