/** The run's course: one figure over the pulse number or over time, the verdict as shape, the rating as a line. */
import { useMemo, useState, type MouseEvent } from "react";
import type { PulseRow, RunCourse } from "../../app/bridge.ts";
import { circlePath, finalVerdict, lozengePath, questionPath } from "../draw/glyph.ts";
import { linear, ticks, type Scale } from "../draw/scale.ts";
import { useWidth } from "../draw/useWidth.ts";
import { stated } from "../format/figure.ts";
import { aired } from "../pulse/curves.ts";
import { chartFigures, movesAlong, valuesAlong, type FigureName } from "./course-figures.ts";
import { CourseMarks } from "./CourseMarks.tsx";

interface Props {
  rows: PulseRow[];
  course: RunCourse | null;
  marked: number;
  rating_V: number | null;
  onOpen(row: PulseRow): void;
}

const left = 64;
const height = 190;
const bottom = height - 24;
const top = 8;

export function RunChart({ rows, course, marked, rating_V, onOpen }: Props) {
  const [name, setName] = useState<FigureName>("kick");
  const [overTime, setOverTime] = useState(false);
  const [box, width] = useWidth<HTMLDivElement>();
  const { unit, words } = chartFigures[name];
  const values = useMemo(() => valuesAlong(name, rows, course), [name, rows, course]);
  const moves = useMemo(() => movesAlong(name, course), [name, course]);
  // While the run grows its course may be a step behind its rows.
  const times = course?.time_s?.length === rows.length ? course.time_s : null;
  const time = overTime ? times : null;
  const places = useMemo(() => time ?? rows.map((_, at) => at + 1), [time, rows]);
  const x = useMemo(() => xScale(places, time !== null, width), [places, time, width]);
  const rating = name === "kick" ? rating_V : null;
  const y = useMemo(() => yScale(values, rating), [values, rating]);
  const dots = useMemo(() => drawDots(rows, values, places, x, y), [rows, values, places, x, y]);
  const openAt = (event: MouseEvent<SVGSVGElement>) => {
    const box = event.currentTarget.getBoundingClientRect();
    const at = nearest(places, x.invert(((event.clientX - box.left) / box.width) * width));
    if (rows[at]) onOpen(rows[at]);
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
          {Object.entries(chartFigures).map(([key, { words }]) => (
            <option key={key} value={key}>
              {words}
            </option>
          ))}
        </select>{" "}
        over the{" "}
        <select
          aria-label="Along"
          value={time ? "time" : "number"}
          onChange={(event) => setOverTime(event.target.value === "time")}
        >
          <option value="number">pulse number</option>
          <option value="time" disabled={times === null}>
            {times === null ? "time: not in the files" : "time"}
          </option>
        </select>
      </h2>
      <svg
        className="drawing"
        viewBox={`0 0 ${width} ${height}`}
        role="img"
        aria-label={`${words} over ${time ? "the time of " : ""}${rows.length} pulses`}
        onClick={openAt}
      >
        {ticks(y.from, y.to, 3).map((level) => (
          <g key={level}>
            <line className="level" x1={left} x2={width} y1={y(level)} y2={y(level)} />
            <text className="label" x={left - 8} y={y(level) + 4} textAnchor="end">
              {stated(level, unit)}
            </text>
          </g>
        ))}
        {rating !== null && rating <= y.to && <Rating y={y} rating={rating} width={width} left={left} />}
        {ticks(x.from, x.to, width < 560 ? 4 : 8)
          .filter((tick) => time !== null || (Number.isInteger(tick) && tick >= 1))
          .map((tick) => (
            <text key={tick} className="label" x={x(tick)} y={height - 6} textAnchor="middle">
              {time ? stated(tick, "s") : tick}
            </text>
          ))}
        <line className="axis" x1={left} x2={width} y1={bottom} y2={bottom} />
        <CourseMarks
          {...{ moves, unit, y, top, bottom }}
          count={rows.length}
          placeOf={(number) => x(places[number - 1] ?? 0)}
        />
        <path className="lozenge" d={dots.lozenges} />
        <path className="circle" d={dots.circles} />
        <path className="question" d={dots.questions} />
        {rows[marked] && <path className="here" d={`M${x(places[marked]) - 6} ${bottom + 3}h12`} />}
      </svg>
      {missing > 0 && <p className="quiet">{missingWords(missing, rows.length)}</p>}
    </section>
  );
}

const missingWords = (missing: number, all: number) =>
  missing === all
    ? "No pulse of this run has this figure; the reason stands on each one’s sheet."
    : `${missing} without this figure; the reason stands on each one’s sheet.`;

function xScale(places: number[], isTime: boolean, width: number): Scale {
  const [first, last] = [places[0] ?? 1, places.at(-1) ?? 1];
  const air = isTime ? Math.max((last - first) * 0.02, 1e-9) : 0.5;
  return linear(first - air, last + air, left, width - 8);
}

/** Places rise along the run. */
function nearest(places: number[], wanted: number): number {
  let best = 0;
  for (let at = 1; at < places.length; at++)
    if (Math.abs(places[at] - wanted) < Math.abs(places[best] - wanted)) best = at;
  return best;
}

function yScale(values: (number | null)[], rating: number | null): Scale {
  const known = values.filter((value) => value !== null);
  const spread = known.reduce(
    ([low, high], value) => [Math.min(low, value), Math.max(high, value)],
    [Infinity, -Infinity],
  );
  const [low, high] = aired(known.length > 0 ? (spread as [number, number]) : [0, 1], 0.12);
  const highest = rating !== null && high > rating * 0.6 ? Math.max(high, rating * 1.04) : high;
  return linear(low, highest, bottom, top);
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

function drawDots(rows: PulseRow[], values: (number | null)[], places: number[], x: Scale, y: Scale) {
  const dots = { lozenges: "", circles: "", questions: "" };
  rows.forEach((row, at) => {
    const value = values[at];
    if (value === null) return;
    const [px, py] = [x(places[at]), y(value)];
    const verdict = finalVerdict(row);
    if (verdict === "spark") dots.lozenges += lozengePath(px, py, 2.8);
    else if (verdict === "unclear") dots.questions += questionPath(px, py, 2.4);
    else dots.circles += circlePath(px, py, 2.6);
  });
  return dots;
}
