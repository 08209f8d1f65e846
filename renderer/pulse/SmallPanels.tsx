/** The panels under the trace: other channels, and what the fit leaves over. */
import type { RingPicture, TraceWindow } from "../../app/bridge.ts";
import { inkPath } from "../draw/ink.ts";
import { linear, type Scale } from "../draw/scale.ts";
import { plain } from "../format/figure.ts";
import { aired, range } from "./curves.ts";
import type { PanelProps } from "./MainPanel.tsx";

function PanelTitle({ panel, text }: { panel: PanelProps["panel"]; text?: string }) {
  return (
    <text className="label" x={2} y={panel.top - 4}>
      {text ?? panel.title}
    </text>
  );
}

/** A dotted line down through the panels where a spark struck. */
export function OnsetLine({ panel, x, pulse }: Pick<PanelProps, "panel" | "x" | "pulse">) {
  const onset = pulse.spark?.onset_s ?? null;
  if (onset === null || onset < x.from || onset > x.to) return null;
  return <line className="onset" x1={x(onset)} x2={x(onset)} y1={panel.top} y2={panel.top + panel.height} />;
}

export function TracePanel({
  panel,
  x,
  span,
  frame,
  pulse,
  trace,
}: PanelProps & { trace: TraceWindow | null }) {
  const found = trace && range([trace], span);
  if (!trace || !found) return null;
  const [low, high] = aired(found);
  const y = linear(low, high, panel.top + panel.height, panel.top);
  return (
    <g>
      <PanelTitle
        panel={panel}
        text={`${panel.title}, ${plain(found[0], trace.unit)} to ${plain(found[1], trace.unit)}`}
      />
      <ZeroLine y={y} width={frame.plotWidth} />
      <OnsetLine panel={panel} x={x} pulse={pulse} />
      <path className="ink" clipPath="url(#plot)" d={inkPath(trace, x, y)} />
    </g>
  );
}

export function ResidualsPanel({ panel, x, frame, pulse, picture }: PanelProps & { picture: RingPicture }) {
  const { residuals } = picture;
  const whole = { from: -Infinity, to: Infinity };
  const found = range([residuals], whole);
  if (!found) return null;
  const reach = Math.max(-found[0], found[1]) || 1;
  const y = linear(-reach, reach, panel.top + panel.height, panel.top);
  const noise = pulse.ring?.noise ?? null;
  const unit = pulse.ring?.unit ?? "V";
  const beside = noise === null ? "" : `, noise ${plain(noise, unit, 2)}`;
  return (
    <g>
      <PanelTitle panel={panel} text={`${panel.title}: ± ${plain(reach, unit, 2)} at most${beside}`} />
      <ZeroLine y={y} width={frame.plotWidth} />
      <path className="ink" clipPath="url(#plot)" d={inkPath(residuals, x, y)} />
    </g>
  );
}

function ZeroLine({ y, width }: { y: Scale; width: number }) {
  if (y.from > 0 || y.to < 0) return null;
  return <line className="level" x1={0} x2={width} y1={y(0)} y2={y(0)} />;
}
