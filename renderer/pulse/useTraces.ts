/** Trace windows of the shown span: the whole record once, and finer ones as the view moves. */
import { useEffect, useRef, useState } from "react";
import type { Bench, TraceWindow } from "../../app/bridge.ts";
import { useBench } from "../state/bench.tsx";
import type { Span } from "./window.ts";

export interface Traces {
  /** By channel: the whole record, thin. */
  whole: Map<number, TraceWindow>;
  /** By channel: the finest that covers the shown span. */
  shown: Map<number, TraceWindow>;
  error: string | null;
}

const none: Traces = { whole: new Map(), shown: new Map(), error: null };

/** Half a span more on either side: a small pan needs no new samples. */
const around = ({ from, to }: Span) => ({ from_s: from - (to - from) / 2, to_s: to + (to - from) / 2 });

export function useTraces(
  capture: number,
  revision: number,
  channels: number[],
  span: Span | null,
  pixels: number,
) {
  const bench = useBench();
  const [traces, setTraces] = useState(none);
  const order = useRef(0);
  const taken = useRef(0);
  const current = useRef(capture);
  current.current = capture;
  const key = channels.join();

  useEffect(() => {
    setTraces(none);
    let wanted = true;
    ask(bench, capture, channels, { from_s: null, to_s: null }, 2000).then(
      (whole) => wanted && setTraces((old) => ({ ...old, whole })),
      (error: unknown) => wanted && setTraces({ ...none, error: String((error as Error).message) }),
    );
    return () => {
      wanted = false;
    };
    // oxlint-disable-next-line react-hooks/exhaustive-deps -- `key` stands for `channels`
  }, [bench, capture, revision, key]);

  useEffect(() => {
    if (!span) return;
    const mine = ++order.current;
    ask(bench, capture, channels, around(span), pixels * 2).then(
      // What an earlier gesture asked for is better than a coarser trace, and never than a later answer.
      (shown) => {
        if (mine < taken.current || capture !== current.current) return;
        taken.current = mine;
        setTraces((old) => ({ ...old, shown }));
      },
      () => undefined,
    );
    // oxlint-disable-next-line react-hooks/exhaustive-deps -- `key` stands for `channels`
  }, [bench, capture, revision, key, span?.from, span?.to, pixels]);

  return traces;
}

async function ask(
  bench: Bench,
  capture: number,
  channels: number[],
  span: { from_s: number | null; to_s: number | null },
  pixels: number,
): Promise<Map<number, TraceWindow>> {
  const width = Math.min(Math.max(Math.round(pixels), 100), 8000);
  const windows = await Promise.all(
    channels.map((channel) => bench.call("trace", { capture, channel, ...span, pixels: width })),
  );
  return new Map(windows.map((trace) => [trace.channel, trace]));
}

/** The finer window where it covers the span, else the whole record's. */
export function best(traces: Traces, channel: number, span: Span): TraceWindow | null {
  const fine = traces.shown.get(channel);
  const whole = traces.whole.get(channel) ?? null;
  if (!fine) return whole;
  const covers = fine.from_s <= span.from + 1e-12 && fine.to_s >= span.to - 1e-12;
  return covers || !whole ? fine : whole;
}
