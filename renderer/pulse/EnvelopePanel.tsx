/** Damping: peaks of the ring on a logarithmic scale, and the line a steady ring would keep. */
import type { RingPicture } from "../../app/bridge.ts";
import { linePath } from "../draw/ink.ts";
import { circlePath } from "../draw/glyph.ts";
import { linear } from "../draw/scale.ts";
import { plain } from "../format/figure.ts";
import { decades } from "./curves.ts";
import type { PanelProps } from "./MainPanel.tsx";
import { OnsetLine } from "./SmallPanels.tsx";

const log = (value: number[]) => value.map((each) => (each > 0 ? Math.log10(each) : null));

export function EnvelopePanel({
  panel,
  x,
  span,
  frame,
  pulse,
  picture,
}: PanelProps & { picture: RingPicture }) {
  const [low, high] = decades(picture);
  const y = linear(low, high, panel.top + panel.height, panel.top);
  const onset = pulse.spark?.onset_s ?? null;
  const dots = picture.peaks.time_s
    .map((time, at) => ({ time, level: picture.peaks.value[at] }))
    .filter(({ time, level }) => time >= span.from && time <= span.to && level > 10 ** low);
  const end = picture.fitted.time_s.at(-1) ?? Infinity;
  const { time_s, value } = picture.envelope;
  const fitted = time_s.filter((time) => time <= end).length;
  const levels = log(value);
  return (
    <g>
      <text className="label" x={2} y={panel.top - 4}>
        {frame.plotWidth < 560 ? "peaks of the ring, logarithmic" : panel.title}
      </text>
      <line
        className="level"
        x1={0}
        x2={frame.plotWidth}
        y1={panel.top + panel.height}
        y2={panel.top + panel.height}
      />
      {[Math.ceil(low), Math.floor(high)]
        .filter((decade, at, all) => all.indexOf(decade) === at && decade <= high)
        .map((decade) => (
          <g key={decade}>
            <line className="level" x1={0} x2={frame.plotWidth} y1={y(decade)} y2={y(decade)} />
            <text className="label" x={frame.plotWidth - 2} y={y(decade) - 3} textAnchor="end">
              {plain(10 ** decade, pulse.ring?.unit ?? "V", 1)}
            </text>
          </g>
        ))}
      <g clipPath="url(#plot)">
        <path
          className="fitted"
          d={linePath(time_s.slice(0, fitted), levels.slice(0, fitted) as number[], x, y)}
        />
        <path
          className="expected"
          d={linePath(
            time_s.slice(Math.max(fitted - 1, 0)),
            levels.slice(Math.max(fitted - 1, 0)) as number[],
            x,
            y,
          )}
        />
        <path
          className="dot"
          d={dots.map(({ time, level }) => circlePath(x(time), y(Math.log10(level)), 2.4)).join("")}
        />
      </g>
      <OnsetLine panel={panel} x={x} pulse={pulse} />
      {onset !== null && onset > span.from && onset < span.to && (
        <text className="label" x={x(onset) + 5} y={panel.top + panel.height - 4}>
          breaks here
        </text>
      )}
    </g>
  );
}
