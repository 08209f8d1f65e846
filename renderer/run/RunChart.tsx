/** The run's course: one figure over the pulse number, the verdict as shape, the rating as a line. */
import { useMemo, useState, type MouseEvent } from "react";
import type { PulseRow } from "../../app/bridge.ts";
import { circlePath, finalVerdict, lozengePath, questionPath } from "../draw/glyph.ts";
import { clamp, linear, ticks, type Scale } from "../draw/scale.ts";
import { useWidth } from "../draw/useWidth.ts";
import { plain, stated } from "../format/figure.ts";
import { aired } from "../pulse/curves.ts";

const figures = {
  kick: { words: "kick", unit: "V", of: (row: PulseRow) => row.peak_V },
  frequency: { words: "ring frequency", unit: "Hz", of: (row: PulseRow) => row.frequency_Hz?.value ?? null },
  q: { words: "Q", unit: "", of: (row: PulseRow) => row.q?.value ?? null },
  probability: { words: "probability of a spark", unit: "", of: (row: PulseRow) => row.probability },
};
type FigureName = keyof typeof figures;

interface Props {
  rows: PulseRow[];
  expected: string | null;
  marked: number;
  rating_V: number | null;
  onOpen(row: PulseRow): void;
}

const left = 64;
const height = 190;
const bottom = height - 24;

export function RunChart({ rows, marked, rating_V, onOpen }: Props) {
  const [name, setName] = useState<FigureName>("kick");
  const [box, width] = useWidth<HTMLDivElement>();
  const { of, unit, words } = figures[name];
  const values = useMemo(() => rows.map(of), [rows, of]);
  const x = useMemo(() => linear(0.5, Math.max(rows.length, 1) + 0.5, left, width - 8), [rows, width]);
  const rating = name === "kick" ? rating_V : null;
  const y = useMemo(() => yScale(values, rating), [values, rating]);
  const dots = useMemo(() => drawDots(rows, values, x, y), [rows, values, x, y]);
  const openAt = (event: MouseEvent<SVGSVGElement>) => {
    const box = event.currentTarget.getBoundingClientRect();
    const at = Math.round(x.invert(((event.clientX - box.left) / box.width) * width)) - 1;
    const row = rows[clamp(at, 0, rows.length - 1)];
    if (row) onOpen(row);
  };
  const missing = values.filter((value) => value === null).length;
  return (
    <section className="run-chart" ref={box}>
      <h2>
        Course of the{" "}
        <select
          aria-label="Figure of the chart"
          value={name}
          onChange={(event) => setName(event.target.value as FigureName)}
        >
          {Object.entries(figures).map(([key, { words }]) => (
            <option key={key} value={key}>
              {words}
            </option>
          ))}
        </select>
      </h2>
      <svg
        className="drawing"
        viewBox={`0 0 ${width} ${height}`}
        role="img"
        aria-label={`${words} over ${rows.length} pulses`}
        onClick={openAt}
      >
        {ticks(y.from, y.to, 3).map((level) => (
          <g key={level}>
            <line className="level" x1={left} x2={width} y1={y(level)} y2={y(level)} />
            <text className="label" x={left - 8} y={y(level) + 4} textAnchor="end">
              {plain(level, unit)}
            </text>
          </g>
        ))}
        {rating !== null && rating <= y.to && <Rating y={y} rating={rating} width={width} left={left} />}
        {ticks(1, rows.length, 8)
          .filter(Number.isInteger)
          .map((number) => (
            <text key={number} className="label" x={x(number)} y={height - 6} textAnchor="middle">
              {number}
            </text>
          ))}
        <line className="axis" x1={left} x2={width} y1={bottom} y2={bottom} />
        <path className="lozenge" d={dots.lozenges} />
        <path className="circle" d={dots.circles} />
        <path className="question" d={dots.questions} />
        {rows[marked] && <path className="here" d={`M${x(marked + 1) - 6} ${bottom + 3}h12`} />}
      </svg>
      {missing > 0 && (
        <p className="quiet">{missing} without this figure; the reason stands on each one’s sheet.</p>
      )}
    </section>
  );
}

function yScale(values: (number | null)[], rating: number | null): Scale {
  const known = values.filter((value) => value !== null);
  const spread = known.reduce(
    ([low, high], value) => [Math.min(low, value), Math.max(high, value)],
    [Infinity, -Infinity],
  );
  const [low, high] = aired(known.length > 0 ? (spread as [number, number]) : [0, 1], 0.12);
  const top = rating !== null && high > rating * 0.6 ? Math.max(high, rating * 1.04) : high;
  return linear(low, top, bottom, 8);
}

function Rating({ y, rating, width, left }: { y: Scale; rating: number; width: number; left: number }) {
  return (
    <g>
      <line className="rating" x1={left} x2={width} y1={y(rating)} y2={y(rating)} />
      <text className="label" x={width} y={y(rating) - 4} textAnchor="end">
        {stated(rating, "V")}, the switch’s rating
      </text>
    </g>
  );
}

function drawDots(rows: PulseRow[], values: (number | null)[], x: Scale, y: Scale) {
  const dots = { lozenges: "", circles: "", questions: "" };
  rows.forEach((row, at) => {
    const value = values[at];
    if (value === null) return;
    const [px, py] = [x(at + 1), y(value)];
    const verdict = finalVerdict(row);
    if (verdict === "spark") dots.lozenges += lozengePath(px, py, 2.8);
    else if (verdict === "unclear") dots.questions += questionPath(px, py, 2.4);
    else dots.circles += circlePath(px, py, 2.6);
  });
  return dots;
}
