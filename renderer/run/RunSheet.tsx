/** The run at a glance: a line of handwriting, a sentence, what needs attention, its course. */
import { useCallback, useMemo, useState } from "react";
import type { PulseRow, RunDetail } from "../../app/bridge.ts";
import { finalVerdict } from "../draw/glyph.ts";
import { figureText, percent, plain } from "../format/figure.ts";
import { countsSentence, dayText, verdictWord } from "../format/words.ts";
import { BesideWith } from "../compare/BesideWith.tsx";
import { Caution } from "../help/Caution.tsx";
import { CopyButton } from "../shell/CopyButton.tsx";
import { SheetHead } from "../shell/SheetHead.tsx";
import { Remarks } from "../shell/Remarks.tsx";
import { Failure, Waiting } from "../shell/States.tsx";
import { useSay } from "../shell/say.tsx";
import { PictureButtons } from "../shell/PictureButtons.tsx";
import { SetupCard } from "../setup/SetupCard.tsx";
import { useAnswer, useDesk } from "../state/bench.tsx";
import { useKeys } from "../state/keys.ts";
import { lastPulseOf } from "../state/last-pulse.ts";
import { go, hrefOf } from "../state/route.ts";
import { Attention } from "./Attention.tsx";
import { Captures } from "./Captures.tsx";
import { Exports } from "./Exports.tsx";
import { Line } from "./Line.tsx";
import { nextKeys, nextPulse, type Wanted } from "./next-pulse.ts";
import { RunChart } from "./RunChart.tsx";
import { Sparks } from "./Sparks.tsx";
import { usePulses } from "./usePulses.ts";

export function RunSheet({ run }: { run: number }) {
  const desk = useDesk();
  const asked = useAnswer("run", { run }, desk.runs[run] ?? 0);
  const course = useAnswer("course", { run }, desk.runs[run] ?? 0);
  const pulses = usePulses(run);
  const [last] = useState(() => lastPulseOf(run));
  const [mark, setMarked] = useState<number | null>(null);
  const say = useSay();
  const { rows } = pulses;
  const marked = mark ?? rows.findIndex((row) => row.capture === last?.capture && row.pulse === last.pulse);

  const open = useCallback(
    (row: PulseRow) => go({ view: "pulse", run, capture: row.capture, pulse: row.pulse }),
    [run],
  );
  const step = (by: number) => setMarked(Math.min(Math.max(marked + by, 0), rows.length - 1));
  const toNext = (wanted: Wanted, none: string) => {
    const next = nextPulse(rows, marked, wanted);
    if (next === null) say(none);
    else setMarked(next);
  };
  useKeys("run", [
    { key: "arrowright", does: "mark the next pulse", act: () => step(1) },
    { key: "arrowleft", does: "mark the pulse before", act: () => step(-1) },
    {
      key: "enter",
      does: "open the marked pulse",
      act: () => rows[Math.max(marked, 0)] && open(rows[Math.max(marked, 0)]),
    },
    ...nextKeys.map(({ key, does, wanted, none }) => ({
      key,
      does: `mark ${does}`,
      act: () => toNext(wanted, none),
    })),
    { key: "arrowup", does: "to the book’s contents", act: () => go({ view: "book" }) },
  ]);

  const detail = asked.answer;
  const expected = detail?.setup.expected ?? null;
  const sentence = useMemo(() => (detail ? countsSentence(detail.counts) : ""), [detail]);
  if (asked.error) return <Failure text={asked.error} />;
  if (!detail) return <Waiting />;
  const { combined } = detail;
  return (
    <article>
      <SheetHead
        title={detail.name}
        plainTitle={detail.name}
        beside={
          <>
            {detail.coil && <a href={hrefOf({ view: "coil", coil: detail.coil })}>{detail.coil}</a>}
            {detail.taken && ` · ${dayText(detail.taken)}`}
          </>
        }
        page={`page ${run}`}
      />
      <Line {...{ rows, expected, current: marked }} onOpen={open} onMark={setMarked} />
      {rows.length > 0 && (
        <p className="legend quiet" aria-hidden="true">
          {rows[marked]
            ? marginOf(rows[marked], expected)
            : "lozenge: spark · circle: none · question mark: unclear · underlined: your own verdict"}
        </p>
      )}
      <p className="sentence">
        {sentence}{" "}
        <CopyButton
          keyName="f"
          does="copy the counts and figures"
          text={() => summary(detail.name, sentence, combined)}
        />
      </p>
      {detail.counts.pulses > 0 && (
        <p className="combined">
          {combinedParts(combined).map(([name, text]) => (
            <span key={name}>
              {name} <span className="tabular">{text}</span>
            </span>
          ))}
        </p>
      )}
      <Attention detail={detail} rows={rows} />
      {rows.length > 1 && (
        <>
          <RunChart
            rows={rows}
            course={course.answer}
            marked={marked}
            rating_V={detail.setup.switchRating_V ?? null}
            onOpen={open}
          />
          <PictureButtons of=".run-chart svg" name={detail.name} />
        </>
      )}
      {course.answer && <Sparks course={course.answer} />}
      <Remarks title="Of this run" notes={notAbove(detail)} />
      <SetupCard run={detail} capture={captureOfCard(detail)} reading={null} />
      <BesideWith run={detail} />
      <Captures detail={detail} rows={rows} />
      <Exports run={run} />
      <Caution />
    </article>
  );
}

/** The card shows the columns of a capture that asks something, else of the first that was read. */
function captureOfCard({ attention, captureRows }: RunDetail): number | null {
  const asking = attention.find((item) => item.kind === "question")?.capture;
  return asking ?? captureRows.find((row) => row.error === null)?.capture ?? null;
}

/** What moved along the run stands among what to look at first. */
const notAbove = ({ notes, attention }: RunDetail) =>
  notes.filter((note) => !attention.some((item) => item.text === note.text));

type Combined = RunDetail["combined"];

function combinedParts(combined: Combined) {
  return [
    ["L", figureText(combined.inductance_H, "H")],
    ["C", figureText(combined.capacitance_F, "F")],
    ["R", figureText(combined.resistance_ohm, "Ω")],
    ["Q", figureText(combined.q, "")],
  ];
}

const summary = (name: string, sentence: string, combined: Combined) =>
  [name, sentence, ...combinedParts(combined).map((pair) => pair.join("\t"))].join("\n");

function marginOf(row: PulseRow, expected: string | null): string {
  const parts = [
    `Pulse ${row.number}: ${verdictWord(finalVerdict(row), expected)}${row.ruled ? " (your verdict)" : ""}`,
    row.probability === null ? "" : `a spark with ${percent(row.probability)}`,
    row.peak_V === null ? "" : `kick ${plain(row.peak_V, "V")}`,
    row.frequency_Hz ? `ring ${figureText(row.frequency_Hz, "Hz")}` : "",
    row.quality && row.quality !== "good" ? `fit ${row.quality}` : "",
  ];
  return parts.filter(Boolean).join(" · ");
}
