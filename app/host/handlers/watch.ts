import type { Handlers } from "../call.ts";
import type { BenchParts } from "./bench-parts.ts";

/** The folders in which captures arrive. */
export function watchHandlers({ watches }: BenchParts): Pick<Handlers, "watch" | "unwatch" | "watching"> {
  return {
    watch: ({ path }) => watches.watch(path),
    unwatch: ({ path }) => ({ unwatched: watches.unwatch(path) }),
    watching: () => watches.list(),
  };
}
