/** The page: one sheet at a time, keys that work everywhere, and the foot with what they are. */
import { lazy, Suspense, useEffect, useMemo, useRef, useState } from "react";
import { BesideSheet } from "../compare/BesideSheet.tsx";
import { Contents } from "../book/Contents.tsx";
import { Help } from "../help/Help.tsx";
import { KeyOverview } from "../help/KeyOverview.tsx";
import { PulseSheet } from "../pulse/PulseSheet.tsx";
import { RunSheet } from "../run/RunSheet.tsx";
import { useDesk } from "../state/bench.tsx";
import { useKeys } from "../state/keys.ts";
import { usePreferences } from "../state/preferences.tsx";
import { go, hrefOf, parseRoute, useRoutePath, type Route } from "../state/route.ts";
import { useTheme } from "../state/theme.ts";
import { Jobs } from "./Jobs.tsx";
import { useOpen } from "./Open.tsx";
import { Waiting } from "./States.tsx";

const CoilSheet = lazy(() => import("../coil/CoilSheet.tsx"));

export function App() {
  const path = useRoutePath();
  const route = useMemo(() => parseRoute(path), [path]);
  const [keysOpen, setKeysOpen] = useState(false);
  const { choose, chooseFolder } = useOpen();
  const turnPaper = useTheme();
  useLastPlace(path);
  useFinishedRun(route);

  useKeys("everywhere", [
    { key: "o", does: "open captures", act: choose },
    { key: "shift+o", does: "open a folder of captures", act: chooseFolder },
    { key: "b", does: "the book’s contents", act: () => go({ view: "book" }) },
    { key: "d", does: "dark or light paper", act: turnPaper },
    { key: "h", does: "help and cautions", act: () => go({ view: "help" }) },
    { key: "f1", does: "help and cautions", act: () => go({ view: "help" }) },
    { key: "k", does: "this overview of keys", act: () => setKeysOpen(true) },
    { key: "ctrl+p", does: "print this sheet", act: () => window.print() },
  ]);
  return (
    <>
      <Jobs />
      <main className="sheet" id="sheet">
        <Suspense fallback={<Waiting />}>
          <Sheet route={route} />
        </Suspense>
      </main>
      <footer className="foot no-print">
        <nav aria-label="The book">
          <button type="button" onClick={choose}>
            <kbd>O</kbd> open captures
          </button>
          <a href={hrefOf({ view: "book" })}>
            <kbd>B</kbd> contents
          </a>
          <a href={hrefOf({ view: "help" })}>
            <kbd>H</kbd> help and cautions
          </a>
          <button type="button" onClick={() => setKeysOpen(true)}>
            <kbd>K</kbd> keys
          </button>
          <button type="button" onClick={turnPaper}>
            <kbd>D</kbd> light or dark
          </button>
        </nav>
      </footer>
      {keysOpen && <KeyOverview onClose={() => setKeysOpen(false)} />}
    </>
  );
}

function Sheet({ route }: { route: Route }) {
  switch (route.view) {
    case "run":
      return <RunSheet key={route.run} run={route.run} />;
    case "pulse":
      return <PulseSheet run={route.run} capture={route.capture} pulse={route.pulse} />;
    case "beside":
      return <BesideSheet key={`${route.first} ${route.second}`} first={route.first} second={route.second} />;
    case "coil":
      return <CoilSheet key={route.coil} coil={route.coil} />;
    case "help":
      return <Help />;
    case "book":
      return <Contents />;
  }
}

/** The page where the book was closed is where it opens again. */
function useLastPlace(path: string): void {
  const { values, set } = usePreferences();
  const restored = useRef(false);
  useEffect(() => {
    if (values === null) return;
    const last = values["last"];
    // The address itself, not this render's path: somebody may have gone elsewhere meanwhile.
    const atStart = location.hash === "" || location.hash === "#/";
    if (!restored.current && atStart && last && last !== "/") location.replace(`#${last}`);
    else if (restored.current && last !== path) set("last", path);
    restored.current = true;
  }, [values, path, set]);
}

/** A run that was read because of what was done on this page opens by itself: that is what it was for. */
function useFinishedRun(route: Route): void {
  const { bench, jobs, followed } = useDesk();
  // The shell asks for a run: its menu of recent runs, a capture opened with the program.
  useEffect(
    () => bench.subscribe((event) => event.type === "show-run" && go({ view: "run", run: event.run })),
    [bench],
  );
  const seen = useRef(new Set<string>());
  useEffect(() => {
    for (const job of jobs) {
      if (job.state === "working" || !followed.includes(job.job) || seen.current.has(job.job)) continue;
      seen.current.add(job.job);
      if (job.state === "done" && job.run !== null && route.view === "book")
        go({ view: "run", run: job.run });
    }
  }, [jobs, followed, route.view]);
}
