/** The whole record as one thin line, the shown stretch marked on it; click or drag to go elsewhere. */
import { useRef, type PointerEvent } from "react";
import type { TraceWindow } from "../../app/bridge.ts";
import type { CaptureReading } from "../../analysis/reading-format.ts";
import { inkPath } from "../draw/ink.ts";
import { linear } from "../draw/scale.ts";
import { plain } from "../format/figure.ts";
import { plural } from "../format/words.ts";
import { aired, range } from "./curves.ts";
import { moved, recordSpan, type Span } from "./window.ts";

interface Props {
  reading: CaptureReading;
  pulse: number;
  trace: TraceWindow | null;
  span: Span;
  width: number;
  onSpan(span: Span): void;
  onPulse(pulse: number): void;
}

const height = 46;

export function RecordLine({ reading, pulse, trace, span, width, onSpan, onPulse }: Props) {
  const dragging = useRef(false);
  const record = recordSpan(reading);
  const x = linear(record.from, record.to, 0, width);
  const found = trace && range([trace], record);
  const y = linear(...aired(found ?? [0, 1]), height - 10, 2);
  const centre = (event: PointerEvent<SVGSVGElement>) => {
    const box = event.currentTarget.getBoundingClientRect();
    const at = x.invert(((event.clientX - box.left) / box.width) * width);
    onSpan(moved(span, at - (span.from + span.to) / 2, record));
  };
  const length =
    reading.timebase.step_s === null
      ? plural(reading.timebase.samples, "sample")
      : plain(record.to - record.from, "s");
  return (
    <section className="record-line" aria-label="The whole record">
      <svg
        viewBox={`0 0 ${width} ${height}`}
        className="drawing"
        aria-hidden="true"
        onPointerDown={(event) => {
          dragging.current = true;
          event.currentTarget.setPointerCapture(event.pointerId);
          centre(event);
        }}
        onPointerMove={(event) => dragging.current && centre(event)}
        onPointerUp={() => (dragging.current = false)}
      >
        {trace && <path className="ink thin" d={inkPath(trace, x, y)} />}
        <path className="bracket" d={bracket(x(span.from), x(span.to))} />
        {reading.pulses.map((each) => {
          if (each.switchOffTime_s === null) return null;
          const mark = x(each.switchOffTime_s);
          return (
            <path
              key={each.index}
              className={each.index === pulse ? "tick here" : "tick"}
              d={`M${mark} ${height - 8}v6`}
            />
          );
        })}
      </svg>
      <p className="quiet">
        The whole record: {length}, {plural(reading.pulses.length, "pulse")}
        {reading.pulses.length > 1 && (
          <>
            {" · "}
            <label>
              go to pulse{" "}
              <select value={pulse} onChange={(event) => onPulse(Number(event.target.value))}>
                {reading.pulses.map((each) => (
                  <option key={each.index} value={each.index}>
                    {each.index + 1}
                  </option>
                ))}
              </select>
            </label>
          </>
        )}
      </p>
    </section>
  );
}

const bracket = (from: number, to: number) => {
  const end = Math.max(to, from + 3);
  return `M${from} 8V1H${end}V8M${from} ${height - 16}V${height - 9}H${end}V${height - 16}`;
};
