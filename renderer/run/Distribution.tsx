/** How a figure of the sparks lies: tally strokes over its range, and what was fitted to it below. */
import { useMemo } from "react";
import { linear, ticks, type Scale } from "../draw/scale.ts";
import { useWidth } from "../draw/useWidth.ts";
import { plain, stated } from "../format/figure.ts";
import { aired } from "../pulse/curves.ts";

export interface FittedMark {
  words: string;
  value: number;
  low: number;
  high: number;
}

interface Props {
  label: string;
  values: number[];
  unit: string;
  marks: FittedMark[];
  /** Drawn over this range, where it is to be compared with another. */
  range?: [low: number, high: number];
}

const height = 92;
const mark_px = 20;

export function Distribution({ label, values, unit, marks, range }: Props) {
  const [box, width] = useWidth<HTMLDivElement>(440);
  const { near, beyond } = useMemo(() => fenced(values), [values]);
  const x = useMemo(() => {
    const all = range ?? [...near, ...marks.flatMap(({ low, high }) => [low, high])];
    const [low, high] = all.reduce(
      ([low, high], value) => [Math.min(low, value), Math.max(high, value)],
      [Infinity, -Infinity],
    );
    const [from, to] = aired([low, high], 0.06);
    return linear(from, to, 4, width - 4);
  }, [near, marks, range, width]);
  const strokes = useMemo(() => tally(near, x), [near, x]);
  const below = height + 6;
  const foot = below + marks.length * mark_px;
  return (
    <div ref={box} className="distribution">
      <svg className="drawing" viewBox={`0 0 ${width} ${foot + 20}`} role="img" aria-label={label}>
        <path className="strokes" d={strokes.path} style={{ strokeWidth: strokes.width }} />
        <line className="axis" x1={0} x2={width} y1={height} y2={height} />
        {marks.map(({ words, value, low, high }, at) => {
          const y = below + at * mark_px + 6;
          const middle = (x(low) + x(high)) / 2;
          const onLeft = middle > width / 2;
          return (
            <g key={words}>
              <path className="interval" d={`M${x(low)} ${y}H${x(high)}M${x(value)} ${y - 5}v10`} />
              <text
                className="label"
                x={onLeft ? x(low) - 6 : x(high) + 6}
                y={y + 4}
                textAnchor={onLeft ? "end" : "start"}
              >
                {words}
              </text>
            </g>
          );
        })}
        {ticks(x.from, x.to, 4).map((tick) => (
          <text key={tick} className="label" x={x(tick)} y={foot + 14} textAnchor={anchorAt(x(tick), width)}>
            {stated(tick, unit)}
          </text>
        ))}
      </svg>
      {beyond.length > 0 && (
        <p className="quiet">
          Far beside the others:{" "}
          {beyond
            .slice(0, 6)
            .map((value) => plain(value, unit))
            .join(", ")}
          {beyond.length > 6 && ` and ${beyond.length - 6} more`}.
        </p>
      )}
    </div>
  );
}

const anchorAt = (x: number, width: number) => (x < 30 ? "start" : x > width - 30 ? "end" : "middle");

/** Values beyond Tukey's outer fences (1977) would take the drawing for themselves: they are named beside it. */
export function fenced(values: number[]): { near: number[]; beyond: number[] } {
  const sorted = values.toSorted((a, b) => a - b);
  const at = (share: number) => sorted[Math.round((sorted.length - 1) * share)];
  const reach = 3 * (at(0.75) - at(0.25));
  const isNear = (value: number) => value >= at(0.25) - reach && value <= at(0.75) + reach;
  return { near: sorted.filter(isNear), beyond: sorted.filter((value) => !isNear(value)) };
}

/** One short stroke a value, stacked. */
function tally(values: number[], x: Scale): { path: string; width: number } {
  // Rice's rule: twice the cube root.
  const count = Math.min(Math.max(Math.ceil(2 * Math.cbrt(values.length)), 5), 24);
  const bins = Array.from({ length: count }, () => 0);
  const step = (x.to - x.from) / count;
  for (const value of values) bins[Math.min(Math.floor((value - x.from) / step), count - 1)]++;
  const pitch = Math.min(8, (height - 6) / Math.max(...bins));
  const stroke = (bin: number, at: number) => {
    const [left, right] = [x(x.from + bin * step) + 2, x(x.from + (bin + 1) * step) - 2];
    return `M${left.toFixed(1)} ${(height - (at + 0.6) * pitch).toFixed(1)}H${right.toFixed(1)}`;
  };
  const path = bins.map((held, bin) => Array.from({ length: held }, (_, at) => stroke(bin, at)).join(""));
  return { path: path.join(""), width: pitch * 0.5 };
}
