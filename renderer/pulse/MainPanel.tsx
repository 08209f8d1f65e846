/** The trace itself: ink, the fitted ring over it, what the ring would have gone on to do. */
import type { RingPicture, TraceWindow } from "../../app/bridge.ts";
import type { PulseReading } from "../../analysis/reading-format.ts";
import type { Setup } from "../../analysis/setup/schema.ts";
import { inkPath, linePath } from "../draw/ink.ts";
import { ticks, type Scale } from "../draw/scale.ts";
import { plain, stated } from "../format/figure.ts";
import type { Frame } from "./layout.ts";
import type { Panel } from "./panels.ts";
import type { Span } from "./window.ts";

export interface PanelProps {
  panel: Panel;
  x: Scale;
  span: Span;
  frame: Frame;
  pulse: PulseReading;
}

interface Props extends PanelProps {
  y: Scale;
  trace: TraceWindow | null;
  picture: RingPicture | null;
  setup: Setup;
}

export function MainPanel({ panel, x, y, span, frame, pulse, trace, picture, setup }: Props) {
  const bottom = panel.top + panel.height;
  return (
    <g>
      <Levels y={y} frame={frame} unit={trace?.unit ?? "V"} setup={setup} />
      <TimeTicks
        x={x}
        span={span}
        y={bottom}
        zero={pulse.switchOffTime_s ?? 0}
        axis={trace?.axis ?? "seconds"}
      />
      <g clipPath="url(#plot)">
        {picture && (
          <path className="expected" d={linePath(picture.expected.time_s, picture.expected.value, x, y)} />
        )}
        {trace && <path className="ink" d={inkPath(trace, x, y)} />}
        {picture && (
          <path className="fitted" d={linePath(picture.fitted.time_s, picture.fitted.value, x, y)} />
        )}
      </g>
      {!trace && (
        <text className="label" x={0} y={panel.top + panel.height / 2}>
          drawing …
        </text>
      )}
    </g>
  );
}

/** A few written levels: a round one near the top, the supply (or zero), the switch's rating. */
function Levels({ y, frame, unit, setup }: { y: Scale; frame: Frame; unit: string; setup: Setup }) {
  const rating = setup.switchRating_V ?? null;
  const supply = setup.supply_V ?? null;
  const round = ticks(y.from, y.to, 4).filter((level) => level !== 0);
  const marks = [
    ...[round.at(0), round.at(-1)].map((level) => ({ level, text: plain(level, unit), kind: "level" })),
    {
      level: unit === "V" && supply !== null ? supply : 0,
      text: supply !== null && unit === "V" ? `${stated(supply, "V")} supply` : `0 ${unit}`,
      kind: "level",
    },
    ...(unit === "V" && rating !== null
      ? [rating, -rating].map((level) => ({
          level,
          text: `${stated(rating, "V")}, the switch’s rating`,
          kind: "rating",
        }))
      : []),
  ];
  const inView = marks.filter(({ level }) => level !== undefined && level > y.from && level < y.to);
  const apart = inView.filter(
    (mark, at) =>
      !inView.some((other, before) => before > at && Math.abs(y(other.level!) - y(mark.level!)) < 14),
  );
  return apart.map(({ level, text, kind }) => (
    <g key={text + level}>
      <line className={kind} x1={0} x2={frame.plotWidth} y1={y(level!)} y2={y(level!)} />
      <text className="label" x={2} y={y(level!) - 4}>
        {text}
      </text>
    </g>
  ));
}

interface TimeProps {
  x: Scale;
  span: Span;
  y: number;
  zero: number;
  axis: TraceWindow["axis"];
}

/** Counted from the switch-off, as the notes count. */
function TimeTicks({ x, span, y, zero, axis }: TimeProps) {
  const marks = ticks(span.from - zero, span.to - zero, 6);
  return (
    <g>
      {marks.map((mark) => (
        <g key={mark}>
          <line className="tick" x1={x(zero + mark)} x2={x(zero + mark)} y1={y} y2={y + 5} />
          <text className="label" x={x(zero + mark)} y={y + 17} textAnchor="middle">
            {axis === "samples" ? `${mark}` : mark === 0 ? "switch-off" : trimmed(mark)}
          </text>
        </g>
      ))}
    </g>
  );
}

const trimmed = (mark: number) => stated(Number(mark.toPrecision(6)), "s");
