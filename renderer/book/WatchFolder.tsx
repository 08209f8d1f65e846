/** A folder the scope saves into: every new capture is read as it comes, and logged here. */
import { useCallback, useEffect, useState } from "react";
import type { WatchState } from "../../app/bridge.ts";
import { plural } from "../format/words.ts";
import { useSay } from "../shell/say.tsx";
import { messageOf, useAnswer, useBench } from "../state/bench.tsx";
import { useKeys } from "../state/keys.ts";
import { hrefOf } from "../state/route.ts";

const logged = 8;

export function WatchFolder() {
  const bench = useBench();
  const say = useSay();
  const hello = useAnswer("hello", {});
  const [path, setPath] = useState("");
  const { watched, log, replace } = useWatched();

  const watch = useCallback(() => {
    bench.call("watch", { path: path.trim() }).then(
      (state) => {
        replace(state);
        setPath("");
      },
      (error: unknown) => say(messageOf(error)),
    );
  }, [bench, path, say, replace]);
  const unwatch = (state: WatchState) =>
    bench.call("unwatch", { path: state.path }).then(
      () => replace(state, true),
      (error: unknown) => say(messageOf(error)),
    );
  useKeys("contents", [
    { key: "w", does: "watch a folder", act: () => document.getElementById("watch-path")?.focus() },
  ]);

  if (!hello.answer?.paths) return null;
  return (
    <section className="watch no-print" aria-labelledby="watch-title">
      <h2 id="watch-title">A folder to watch</h2>
      <form
        onSubmit={(event) => {
          event.preventDefault();
          watch();
        }}
      >
        <label>
          <kbd>W</kbd> read every capture saved into{" "}
          <input
            id="watch-path"
            value={path}
            onChange={(event) => setPath(event.target.value)}
            placeholder="the folder’s full path"
          />
        </label>{" "}
        <button type="submit" disabled={path.trim() === ""}>
          watch
        </button>
      </form>
      {watched.map((state) => (
        <div key={state.path}>
          <p>
            Watching <strong>{state.path}</strong>: {plural(state.captures, "capture")} so far.{" "}
            {state.run !== null && <a href={hrefOf({ view: "run", run: state.run })}>its run</a>}{" "}
            <button type="button" className="small" onClick={() => unwatch(state)}>
              stop
            </button>
          </p>
        </div>
      ))}
      {log.length > 0 && (
        <ol className="watch-log" aria-live="polite">
          {log.map(({ number, text }) => (
            <li key={number}>{text}</li>
          ))}
        </ol>
      )}
    </section>
  );
}

interface LogLine {
  number: number;
  text: string;
}

const logLine = (before: number, { at, text }: NonNullable<WatchState["last"]>): LogLine => ({
  number: before + 1,
  text: `${new Date(at).toLocaleTimeString("en-GB")} ${text}`,
});

function useWatched() {
  const bench = useBench();
  const [watched, setWatched] = useState<WatchState[]>([]);
  const [log, setLog] = useState<LogLine[]>([]);
  const replace = useCallback((state: WatchState, gone = false) => {
    setWatched((old) => [...old.filter((other) => other.path !== state.path), ...(gone ? [] : [state])]);
  }, []);
  useEffect(() => {
    bench.call("watching", {}).then(setWatched, () => undefined);
    return bench.subscribe((event) => {
      if (event.type !== "watch") return;
      const { watch } = event;
      setWatched((old) =>
        old.some((other) => other.path === watch.path)
          ? old.map((other) => (other.path === watch.path ? watch : other))
          : old,
      );
      if (watch.last)
        setLog((old) => [...old.slice(1 - logged), logLine(old.at(-1)?.number ?? 0, watch.last!)]);
    });
  }, [bench]);
  return { watched, log, replace };
}
