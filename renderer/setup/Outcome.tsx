/** What the file would say with this change of the setup: its trace and a sentence, beside the choice. */
import type { TriedSetup } from "../../app/bridge.ts";
import { inkPath } from "../draw/ink.ts";
import { linear } from "../draw/scale.ts";
import { figureText, plain } from "../format/figure.ts";
import { plural } from "../format/words.ts";
import { aired, range } from "../pulse/curves.ts";
import { useAnswer, useDesk } from "../state/bench.tsx";

const width = 300;
const height = 54;

/** Whose file is tried: a capture of a run. */
export interface Tried {
  run: number;
  capture: number;
}

interface Props {
  tried: Tried;
  change: Record<string, unknown> | null;
  /** The column whose trace is shown; else the one that rings. */
  channel?: string;
}

export function Outcome({ tried: { run, capture }, change, channel }: Props) {
  const { runs } = useDesk();
  const asked = useAnswer(
    "trySetup",
    change && { capture, change, channel: channel ?? null, pixels: width },
    runs[run] ?? 0,
  );
  if (asked.error) return <p className="outcome quiet">So it can’t be read: {asked.error}</p>;
  if (!asked.answer) return <p className="outcome quiet">{change ? "Reading it so …" : ""}</p>;
  return (
    <div className="outcome">
      <Sketch trace={asked.answer.trace} />
      <p className="tabular">{outcomeSentence(asked.answer)}</p>
    </div>
  );
}

function Sketch({ trace }: Pick<TriedSetup, "trace">) {
  const span = { from: trace.from_s, to: trace.to_s };
  const [low, high] = aired(range([trace], span) ?? [0, 1]);
  const x = linear(span.from, span.to, 0, width);
  const y = linear(low, high, height - 2, 2);
  return (
    <svg
      className="drawing"
      viewBox={`0 0 ${width} ${height}`}
      role="img"
      aria-label={`${trace.name}, so read`}
    >
      <path className="ink thin" d={inkPath(trace, x, y)} />
    </svg>
  );
}

/** 3000 samples, 2.00 µs apart, 6.00 ms in all. “node” −138 V to 162 V. 1 switch-off, ring 4.000 kHz. */
function outcomeSentence(tried: TriedSetup): string {
  const { records, samples, step_s, switchOffs, frequency_Hz, inductance_H, trace } = tried;
  const reach = range([trace], { from: trace.from_s, to: trace.to_s });
  const parts = [
    records > 1 ? `${records} records, the first of` : "",
    `${samples} samples`,
    step_s === null
      ? "of unknown interval."
      : `${plain(step_s, "s")} apart, ${plain(step_s * (samples - 1), "s")} in all.`,
    reach ? `“${trace.name}” ${plain(reach[0], trace.unit)} to ${plain(reach[1], trace.unit)}.` : "",
    switchOffs === 0 ? "No switch-off found." : plural(switchOffs, "switch-off"),
    switchOffs === 0
      ? ""
      : frequency_Hz
        ? `with a ring of ${figureText(frequency_Hz, "Hz")}`
        : "without a good ring",
    switchOffs > 0 && inductance_H ? `and L ${figureText(inductance_H, "H")}` : "",
  ];
  const said = parts.filter(Boolean).join(" ");
  return said.endsWith(".") ? said : `${said}.`;
}
