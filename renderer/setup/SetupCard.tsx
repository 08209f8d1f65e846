/** The card that lies on each sheet: what is stated on its face, where it all came from on its back. */
import { useCallback, useState } from "react";
import type { RunDetail } from "../../app/bridge.ts";
import type { CaptureReading } from "../../analysis/reading-format.ts";
import { messageOf, useAnswer, useBench, useDesk } from "../state/bench.tsx";
import { useKeys } from "../state/keys.ts";
import { useSay } from "../shell/say.tsx";
import { CardBack } from "./CardBack.tsx";
import { CardFace } from "./CardFace.tsx";
import { Doubts } from "./Doubts.tsx";
import { Questions } from "./Questions.tsx";

interface Props {
  run: RunDetail;
  /** The capture its channels and preview are shown of. */
  capture: number | null;
  reading: CaptureReading | null;
}

export type Change = (change: Record<string, unknown>) => void;

export function SetupCard({ run, capture, reading }: Props) {
  const bench = useBench();
  const say = useSay();
  const { runs } = useDesk();
  const [turned, setTurned] = useState(false);
  const asked = useAnswer(
    "capture",
    reading === null && capture !== null ? { capture } : null,
    runs[run.run] ?? 0,
  );
  const shown = reading ?? asked.answer?.reading ?? null;

  const change = useCallback<Change>(
    (change) => {
      bench.call("changeSetup", { run: run.run, change }).then(
        () => say("Changed; the run is judged anew."),
        (error: unknown) => say(messageOf(error)),
      );
    },
    [bench, run.run, say],
  );
  const undo = useCallback(() => {
    bench.call("undo", { run: run.run }).then(
      ({ text }) => say(text),
      (error: unknown) => say(messageOf(error)),
    );
  }, [bench, run.run, say]);
  useKeys("setup card", [
    { key: "e", does: "turn the setup card over", act: () => setTurned((old) => !old) },
    { key: "ctrl+z", does: "undo the last change of setup or verdict", act: undo },
  ]);

  return (
    <section className={turned ? "card turned" : "card"} id="setup-card" aria-label="Setup card">
      <div className="card-head">
        <h2>{turned ? "Setup, the back of the card" : "Setup"}</h2>
        <button
          type="button"
          className="small no-print"
          aria-expanded={turned}
          onClick={() => setTurned(!turned)}
        >
          <kbd>E</kbd> turn the card over
        </button>
        {run.canUndo && (
          <button type="button" className="small no-print" onClick={undo}>
            <kbd>Ctrl Z</kbd> undo
          </button>
        )}
      </div>
      <Questions run={run} capture={capture} reading={shown} onChange={change} />
      <Doubts setup={run.setup} reading={shown} onChange={change} />
      {turned ? (
        <CardBack {...{ run, reading: shown, capture }} onChange={change} />
      ) : (
        <CardFace run={run} reading={shown} />
      )}
    </section>
  );
}
