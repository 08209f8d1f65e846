import { stat } from "node:fs/promises";
import { join, resolve } from "node:path";
import type { BenchEvent, WatchState } from "../../bridge.ts";
import { CallError, describeFailure } from "../failure.ts";
import { isCaptureFile } from "../reading/index.ts";
import { createFolderScan, type FolderScan } from "./folder-scan.ts";

export interface WatchTools {
  emit(event: BenchEvent): void;
  /** Reads files as a job; settles when it is done and answers their run and what went wrong. */
  read(paths: string[]): Promise<{ run: number | null; problems: string[] }>;
  /** Whether the book has the file as it is. */
  known(path: string, bytes: number, changed_ms: number): boolean;
  /** The watched folders, kept over restarts. */
  remember(paths: string[]): void;
  /** Pause between two looks, ms. */
  pause_ms?: number;
  settle_ms?: number;
}

export interface Watches {
  watch(path: string): Promise<WatchState>;
  unwatch(path: string): boolean;
  list(): WatchState[];
  close(): void;
}

interface Watched {
  state: WatchState;
  scan: FolderScan;
  timer: NodeJS.Timeout | null;
  ended: boolean;
}

/** The folders in which captures arrive, each looked at until it is unwatched. */
export function createWatches(tools: WatchTools): Watches {
  const watched = new Map<string, Watched>();
  const { pause_ms = 500, settle_ms = 1000 } = tools;

  function tell(entry: Watched, text: string) {
    entry.state.last = { at: new Date().toISOString(), text };
    tools.emit({ type: "watch", watch: structuredClone(entry.state) });
  }

  async function lookOnce(entry: Watched) {
    const names = await entry.scan.look();
    if (names.length === 0) return;
    const { run, problems } = await tools.read(names.map((name) => join(entry.state.path, name)));
    entry.state.run = run ?? entry.state.run;
    entry.state.captures += names.length - problems.length;
    tell(entry, problems[0] ?? (names.length === 1 ? `read ${names[0]}` : `read ${names.length} captures`));
  }

  async function keepLooking(entry: Watched) {
    try {
      await lookOnce(entry);
    } catch (error) {
      // A share that went away may come back: say it once and go on looking.
      const { text } = describeFailure(error);
      if (entry.state.last?.text !== text) tell(entry, text);
    }
    if (!entry.ended) entry.timer = setTimeout(() => void keepLooking(entry), pause_ms);
  }

  const remember = () => tools.remember([...watched.keys()]);

  return {
    async watch(given) {
      const path = resolve(given);
      const already = watched.get(path);
      if (already) return structuredClone(already.state);
      if (!(await stat(path)).isDirectory()) throw new CallError("not-a-folder", `${path} is not a folder`);
      const scan = createFolderScan(path, { wanted: isCaptureFile, settle_ms, known: tools.known });
      const state: WatchState = { path, run: null, captures: 0, last: null };
      const entry: Watched = { state, scan, timer: null, ended: false };
      watched.set(path, entry);
      remember();
      void keepLooking(entry);
      return structuredClone(state);
    },
    unwatch(given) {
      const entry = watched.get(resolve(given));
      if (!entry) return false;
      end(entry);
      watched.delete(entry.state.path);
      remember();
      return true;
    },
    list: () => [...watched.values()].map(({ state }) => structuredClone(state)),
    close() {
      for (const entry of watched.values()) end(entry);
    },
  };
}

function end(entry: Watched) {
  entry.ended = true;
  if (entry.timer) clearTimeout(entry.timer);
}
