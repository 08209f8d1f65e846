/** One pulse: the run's line above, the trace with its notes, figures, verdict. */
import { useCallback, useEffect, useMemo, useState } from "react";
import type { PulseRow } from "../../app/bridge.ts";
import type { Verdict } from "../../analysis/reading-format.ts";
import { useWidth } from "../draw/useWidth.ts";
import { Line } from "../run/Line.tsx";
import { usePulses } from "../run/usePulses.ts";
import { SetupCard } from "../setup/SetupCard.tsx";
import { useAnswer, useDesk } from "../state/bench.tsx";
import { useKeys } from "../state/keys.ts";
import { rememberPulse } from "../state/last-pulse.ts";
import { go, hrefOf } from "../state/route.ts";
import { fileName } from "../format/words.ts";
import { SheetHead } from "../shell/SheetHead.tsx";
import { PictureButtons } from "../shell/PictureButtons.tsx";
import { Remarks } from "../shell/Remarks.tsx";
import { Failure, Waiting } from "../shell/States.tsx";
import { Figures } from "./Figures.tsx";
import { marginNotes } from "./notes.ts";
import { mainChannel, panelsFor } from "./panels.ts";
import { PulseFigure } from "./PulseFigure.tsx";
import { PulseSteps } from "./PulseSteps.tsx";
import { RecordLine } from "./RecordLine.tsx";
import { useTraces } from "./useTraces.ts";
import { VerdictLine } from "./VerdictLine.tsx";
import { moved, pulseSpan, recordSpan, zoomed, type Span } from "./window.ts";

interface Props {
  run: number;
  capture: number;
  pulse: number;
}

export function PulseSheet({ run, capture, pulse: index }: Props) {
  const desk = useDesk();
  const revision = desk.runs[run] ?? 0;
  const detail = useAnswer("run", { run }, revision);
  const asked = useAnswer("capture", { capture }, revision);
  const picture = useAnswer("ringPicture", { capture, pulse: index, pixels: 1600 }, revision);
  const pulses = usePulses(run);
  const [box, width] = useWidth<HTMLDivElement>();
  const [moves, setMoves] = useState<{ key: string; span: Span } | null>(null);

  useEffect(() => rememberPulse({ run, capture, pulse: index }), [run, capture, index]);

  const reading = asked.answer?.reading ?? null;
  const pulse = reading?.pulses[index] ?? null;
  const key = `${capture}/${index}`;
  const home = useMemo(() => (reading && pulse ? pulseSpan(reading, pulse) : null), [reading, pulse]);
  const span = moves?.key === key ? moves.span : home;
  const setup = asked.answer?.setup ?? null;
  const channels = useMemo(() => {
    if (!reading || !pulse) return [];
    const shown = panelsFor(reading, pulse, null).panels.map((panel) => panel.channel);
    return [...new Set([mainChannel(reading, pulse), ...shown])];
  }, [reading, pulse]);
  const traces = useTraces(capture, revision, channels, span, Math.max(width, 400));
  const notes = useMemo(
    () => (reading && pulse && setup ? marginNotes(reading, pulse, setup) : []),
    [reading, pulse, setup],
  );

  const onMove = useCallback(
    (change: { pan?: number; factor?: number; at?: number; reset?: true }) => {
      if (!reading || !home) return;
      const limit = recordSpan(reading);
      const step = reading.timebase.step_s ?? 1;
      setMoves((old) => {
        const now = old?.key === key ? old.span : home;
        if (change.reset) return null;
        if (change.pan !== undefined) return { key, span: moved(now, change.pan, limit) };
        return {
          key,
          span: zoomed(now, change.factor ?? 1, change.at ?? (now.from + now.to) / 2, limit, step),
        };
      });
    },
    [reading, home, key],
  );
  const showSpan = useCallback((span: Span) => setMoves({ key, span }), [key]);

  const at = pulses.rows.findIndex((row) => row.capture === capture && row.pulse === index);
  const openPulse = useCallback(
    (row: PulseRow) => go({ view: "pulse", run, capture: row.capture, pulse: row.pulse }, true),
    [run],
  );
  const width_s = span ? span.to - span.from : 0;
  useKeys("pulse", [
    { key: "arrowup", does: "back to the run", act: () => go({ view: "run", run }) },
    { key: "+", does: "look closer", act: () => onMove({ factor: 0.6 }) },
    { key: "-", does: "see more", act: () => onMove({ factor: 1 / 0.6 }) },
    { key: "0", does: "the whole pulse again", act: () => onMove({ reset: true }) },
    { key: "9", does: "the whole record", act: () => reading && showSpan(recordSpan(reading)) },
    { key: "shift+arrowright", does: "move the view later", act: () => onMove({ pan: width_s / 5 }) },
    { key: "shift+arrowleft", does: "move the view earlier", act: () => onMove({ pan: -width_s / 5 }) },
  ]);

  const problem = asked.error ?? detail.error ?? traces.error;
  if (problem) return <Failure text={problem} run={run} />;
  if (!reading || !pulse || !detail.answer || !setup || !span)
    return asked.answer && !pulse ? (
      <Failure text="This capture has no such pulse." run={run} />
    ) : (
      <Waiting />
    );

  const row = pulses.rows[at] ?? null;
  const label = `Pulse ${row?.number ?? index + 1} of ${pulses.rows.length}`;
  const verdict: Verdict | null = pulse.ruled?.verdict ?? pulse.spark?.verdict ?? null;
  return (
    <article>
      <SheetHead
        title={<a href={hrefOf({ view: "run", run })}>{detail.answer.name}</a>}
        plainTitle={`${label}, ${detail.answer.name}`}
        beside={[detail.answer.coil, fileName(asked.answer!.file)].filter(Boolean).join(" · ")}
        page={`page ${run} · ${label.toLowerCase()}`}
      />
      <Line rows={pulses.rows} expected={setup.expected ?? null} current={at} excerpt onOpen={openPulse} />
      <PulseSteps rows={pulses.rows} at={at} onOpen={openPulse} />
      <VerdictLine capture={capture} pulse={pulse} setup={setup} />
      <div ref={box} className="figure-box">
        <PulseFigure
          {...{ width, reading, pulse, setup, notes, traces, span, onMove }}
          picture={picture.answer}
          label={`${label}, drawn. ${verdict ?? "not judged"}. Arrow keys go from pulse to pulse.`}
        />
      </div>
      <RecordLine
        reading={reading}
        pulse={index}
        trace={traces.whole.get(channels[0]) ?? null}
        span={span}
        onSpan={showSpan}
        width={width}
        onPulse={(pulse) => go({ view: "pulse", run, capture, pulse }, true)}
      />
      <PictureButtons of=".pulse-figure svg" name={`${detail.answer.name} ${label}`} />
      <Figures reading={reading} pulse={pulse} setup={setup} />
      <Remarks title="Of this capture" notes={reading.notes.filter((note) => note.pulse === undefined)} />
      <SetupCard run={detail.answer} capture={capture} reading={reading} />
    </article>
  );
}
