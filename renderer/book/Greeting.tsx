/** An empty book: what this is, the demo run, three steps. */
import { useCallback } from "react";
import { Caution } from "../help/Caution.tsx";
import { SheetHead } from "../shell/SheetHead.tsx";
import { useSay } from "../shell/say.tsx";
import { messageOf, useDesk } from "../state/bench.tsx";
import { useKeys } from "../state/keys.ts";
import { hrefOf } from "../state/route.ts";
import { useOpen } from "../shell/Open.tsx";
import { WatchFolder } from "./WatchFolder.tsx";

export function Greeting() {
  const { bench, follow } = useDesk();
  const say = useSay();
  const { choose, chooseFolder } = useOpen();
  const demo = useCallback(() => {
    bench.call("openDemo", {}).then(
      ({ job }) => follow(job),
      (error: unknown) => say(messageOf(error)),
    );
  }, [bench, follow, say]);
  useKeys("first page", [{ key: "enter", does: "read the demo run", act: demo }]);
  return (
    <article className="greeting">
      <SheetHead title="An empty book" plainTitle="An empty book" />
      <p className="sentence">
        Hit a coil with pulses, save the scope’s CSV, and this book tells you every switch-off, what the ring
        says of L, C, R and Q, how near the kick came to the switch’s rating, and which pulses sparked.
      </p>
      <ol className="steps">
        <li>
          <h2>Look at the demo run</h2>
          <p>
            Ten single pulses and a train of a workshop’s igniter coil. It is invented, computed by a circuit
            simulator.{" "}
            <button type="button" onClick={demo}>
              <kbd>Enter</kbd> read the demo run
            </button>
          </p>
        </li>
        <li>
          <h2>Bring your own captures</h2>
          <p>
            Drop files or folders anywhere on this page, or{" "}
            <button type="button" onClick={choose}>
              <kbd>O</kbd> choose files
            </button>{" "}
            <button type="button" onClick={chooseFolder}>
              <kbd>Shift O</kbd> choose a folder
            </button>
          </p>
        </li>
        <li>
          <h2>Turn the setup card over</h2>
          <p>
            State the capacitor, the supply, the switch’s rating. Whatever the file did not tell is asked
            there, and every figure says what it rests on.{" "}
            <a href={hrefOf({ view: "help" })}>How it is meant to be used</a>.
          </p>
        </li>
      </ol>
      <WatchFolder />
      <Caution />
    </article>
  );
}
