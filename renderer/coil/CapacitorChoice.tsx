/** Another capacitor: a slider, and what peak, ring and margin would follow. */
import { useMemo, useState } from "react";
import type { CapacitorOption, CoilSheet } from "../../app/bridge.ts";
import { figureText, percent, plain, stated } from "../format/figure.ts";
import { useAnswer, useDesk } from "../state/bench.tsx";
import { Plot, type Ink } from "./Plot.tsx";

const points = 121;
const capacitorAxis = { words: "capacitor", unit: "F", log: true };
const peakAxis = { words: "peak at the switch", unit: "V" };
/** Decades to either side of the fitted capacitor. */
const reach = 1.5;

export function CapacitorChoice({ sheet }: { sheet: CoilSheet }) {
  const { book } = useDesk();
  const { drive, coil } = sheet;
  const centre = drive.capacitance_F?.value ?? null;
  const capacitances_F = useMemo(() => (centre === null ? [] : grid(centre)), [centre]);
  const [at, setAt] = useState((points - 1) / 2);
  const argument =
    centre === null ? null : { coil, capacitances_F, current_A: drive.current_A?.value ?? null };
  const asked = useAnswer("capacitorChoice", argument, book);
  const options = asked.answer;
  const option = options?.[at] ?? null;
  const plot = useMemo(
    () =>
      options && {
        data: (ink: Ink) => curves(options, at, drive.rating_V, ink),
        x: capacitorAxis,
        y: peakAxis,
        label: "Peak against capacitor",
      },
    [options, at, drive.rating_V],
  );
  return (
    <section className="capacitor-choice" aria-labelledby="choice-title">
      <h2 id="choice-title">Another capacitor</h2>
      {centre === null || asked.error ? (
        <p className="quiet">
          {asked.error ??
            drive.reason ??
            "It needs the coil’s inductance, a capacitor and the current at switch-off."}
        </p>
      ) : (
        <>
          <p>
            With L {figureText(drive.inductance_H, "H")} and {figureText(drive.current_A, "A")} at switch-off
            {drive.supply_V !== null && ` from ${stated(drive.supply_V, "V")}`}.{" "}
            {drive.smallest_F &&
              `The smallest that keeps the kick under the rating: ${figureText(drive.smallest_F, "F")}.`}
          </p>
          <label className="slider">
            capacitor{" "}
            <span className="tabular">{plain(option?.capacitance_F ?? capacitances_F[at], "F")}</span>
            <input
              type="range"
              min={0}
              max={points - 1}
              value={at}
              aria-valuetext={plain(capacitances_F[at], "F")}
              onChange={(event) => setAt(Number(event.target.value))}
            />
          </label>
          <p className="sentence" role="status">
            {option ? optionSentence(option) : "…"}
          </p>
          {plot && <Plot {...plot} />}
        </>
      )}
    </section>
  );
}

function optionSentence(option: CapacitorOption): string {
  const margin =
    option.margin === null
      ? ""
      : `, ${option.margin < 0 ? "over the rating by" : "margin"} ${percent(Math.abs(option.margin))}`;
  const warn = option.margin !== null && option.margin < 0.2 ? "! " : "";
  return `${warn}Kick ${figureText(option.peak_V, "V")}${margin}; ring ${figureText(option.frequency_Hz, "Hz")}.`;
}

const grid = (centre: number) =>
  Array.from(
    { length: points },
    (_, at) => centre * 10 ** (((at - (points - 1) / 2) / ((points - 1) / 2)) * reach),
  );

function curves(options: CapacitorOption[], at: number, rating: number | null, ink: Ink) {
  const x = options.map((option) => option.capacitance_F);
  const peaks = options.map((option) => option.peak_V?.value ?? null);
  return [
    {
      x,
      y: peaks,
      mode: "lines" as const,
      line: { color: ink.fit, width: 2 },
      text: options.map(
        (option) => `${plain(option.capacitance_F, "F")}: ${plain(option.peak_V?.value, "V")}`,
      ),
      hovertemplate: "%{text}<extra></extra>",
    },
    {
      x: [x[at]],
      y: [peaks[at]],
      mode: "markers" as const,
      marker: { color: ink.ink, size: 9 },
      hoverinfo: "skip" as const,
    },
    ...(rating === null
      ? []
      : [
          {
            x: [x[0], x.at(-1)!],
            y: [rating, rating],
            mode: "lines" as const,
            line: { color: ink.warning, width: 1.5, dash: "dash" as const },
            hovertemplate: `the switch’s ${stated(rating, "V")}<extra></extra>`,
          },
        ]),
  ];
}
