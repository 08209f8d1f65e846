/** The pulse drawn in ink, with its notes in the margin. One SVG, so that it leaves the page whole. */
import { useMemo, useRef, useState } from "react";
import type { RingPicture } from "../../app/bridge.ts";
import type { CaptureReading, PulseReading } from "../../analysis/reading-format.ts";
import type { Setup } from "../../analysis/setup/schema.ts";
import { linear } from "../draw/scale.ts";
import { EnvelopePanel } from "./EnvelopePanel.tsx";
import { aired, asSamples, range } from "./curves.ts";
import { frameFor, placeNotes } from "./layout.ts";
import { MainPanel } from "./MainPanel.tsx";
import { Leaders, NoteList, WrittenNotes } from "./Notes.tsx";
import type { MarginNote } from "./notes.ts";
import { panelsFor } from "./panels.ts";
import { ResidualsPanel, TracePanel } from "./SmallPanels.tsx";
import { useGestures } from "./useGestures.ts";
import { best, type Traces } from "./useTraces.ts";
import type { Span } from "./window.ts";

export interface PulseFigureProps {
  width: number;
  reading: CaptureReading;
  pulse: PulseReading;
  setup: Setup;
  notes: MarginNote[];
  picture: RingPicture | null;
  traces: Traces;
  span: Span;
  label: string;
  onMove(change: { pan?: number; factor?: number; at?: number; reset?: true }): void;
}

export function PulseFigure(props: PulseFigureProps) {
  const { width, reading, pulse, setup, notes, picture, traces, span, onMove } = props;
  const [lit, setLit] = useState<string | null>(null);
  const frame = useMemo(() => frameFor(width), [width]);
  const { panels, height } = useMemo(() => panelsFor(reading, pulse, picture), [reading, pulse, picture]);
  const x = useMemo(() => linear(span.from, span.to, 0, frame.plotWidth), [span, frame]);
  const main = panels[0];
  const trace = best(traces, main.channel, span);

  const y = useMemo(() => {
    const curves = [trace, picture && asSamples(picture.expected)].filter((curve) => curve !== null);
    const found = aired(withRating(range(curves, span) ?? [0, 1], setup.switchRating_V ?? null));
    return linear(found[0], found[1], main.top + main.height, main.top);
  }, [trace, picture, span, main, setup]);

  const placed = useMemo(() => {
    if (!trace) return [];
    const others = picture ? [asSamples(picture.expected), asSamples(picture.fitted)] : [];
    const band = { top: 10, bottom: main.top + main.height + 22 };
    const period_s = 1 / (pulse.ring?.modes[0]?.frequency_Hz.value ?? Infinity) || null;
    return placeNotes(notes, { trace, others, span, x, y, band, period_s }, frame, 4, height - 6);
  }, [trace, picture, notes, span, x, y, frame, main, height, pulse]);

  const tall = frame.notesX === null ? height : Math.max(height, bottomOf(placed));
  const drawing = useRef<SVGSVGElement>(null);
  const handlers = useGestures(x, frame.plotWidth, onMove, placed, setLit, drawing);
  const shared = { x, span, frame, pulse };
  return (
    <figure className="pulse-figure">
      <svg
        ref={drawing}
        className="drawing"
        viewBox={`0 0 ${width} ${tall}`}
        role="group"
        aria-label={props.label}
        tabIndex={0}
        {...handlers}
      >
        <defs>
          <clipPath id="plot">
            <rect x={0} y={0} width={frame.plotWidth} height={tall} />
          </clipPath>
        </defs>
        {frame.notesX !== null && (
          <line className="margin-rule" x1={frame.notesX - 14} x2={frame.notesX - 14} y1={0} y2={tall} />
        )}
        <MainPanel {...shared} panel={main} y={y} trace={trace} picture={picture} setup={setup} />
        {panels.slice(1).map((panel) => {
          if (panel.kind === "channel") {
            const trace = best(traces, panel.channel, span);
            return <TracePanel key={panel.id} {...shared} panel={panel} trace={trace} />;
          }
          if (!picture) return null;
          if (panel.kind === "residuals")
            return <ResidualsPanel key={panel.id} {...shared} panel={panel} picture={picture} />;
          return <EnvelopePanel key={panel.id} {...shared} panel={panel} picture={picture} />;
        })}
        <Leaders placed={placed} frame={frame} lit={lit} />
        {frame.notesX !== null && (
          <WrittenNotes placed={placed} x={frame.notesX} lit={lit} onLight={setLit} />
        )}
      </svg>
      {frame.notesX === null && <NoteList placed={placed} lit={lit} onLight={setLit} />}
    </figure>
  );
}

/** The rating's line belongs into view once the peak comes near it. */
function withRating([low, high]: [number, number], rating: number | null): [number, number] {
  if (rating === null || Math.max(high, -low) < rating * 0.6 || Math.max(high, -low) > rating * 1.6)
    return [low, high];
  return high >= -low ? [low, Math.max(high, rating)] : [Math.min(low, -rating), high];
}

const bottomOf = (placed: { top: number; title: string[]; text: string[] }[]) =>
  Math.max(0, ...placed.map((note) => note.top + note.title.length * 19 + note.text.length * 17 + 8));
