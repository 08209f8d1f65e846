/** Where in the book the page is open; kept in the address, so back, forward and reload work. */
import { useSyncExternalStore } from "react";

export type Route =
  | { view: "book" }
  | { view: "run"; run: number }
  | { view: "beside"; first: number; second: number }
  | { view: "pulse"; run: number; capture: number; pulse: number }
  | { view: "coil"; coil: string }
  | { view: "help" };

const number = String.raw`(\d{1,9})`;
const runPath = new RegExp(`^/run/${number}$`);
const pulsePath = new RegExp(`^/pulse/${number}/${number}/${number}$`);
const besidePath = new RegExp(`^/beside/${number}/${number}$`);
const coilPath = /^\/coil\/(.+)$/;

export function parseRoute(path: string): Route {
  const run = runPath.exec(path);
  if (run) return { view: "run", run: Number(run[1]) };
  const pulse = pulsePath.exec(path);
  if (pulse) {
    const [run, capture, index] = pulse.slice(1).map(Number);
    return { view: "pulse", run, capture, pulse: index };
  }
  const beside = besidePath.exec(path);
  if (beside) return { view: "beside", first: Number(beside[1]), second: Number(beside[2]) };
  const coil = coilPath.exec(path);
  if (coil) return { view: "coil", coil: decoded(coil[1]) };
  return path === "/help" ? { view: "help" } : { view: "book" };
}

function decoded(text: string): string {
  try {
    return decodeURIComponent(text);
  } catch {
    return text;
  }
}

export function pathOf(route: Route): string {
  switch (route.view) {
    case "book":
      return "/";
    case "run":
      return `/run/${route.run}`;
    case "pulse":
      return `/pulse/${route.run}/${route.capture}/${route.pulse}`;
    case "beside":
      return `/beside/${route.first}/${route.second}`;
    case "coil":
      return `/coil/${encodeURIComponent(route.coil)}`;
    case "help":
      return "/help";
  }
}

export const hrefOf = (route: Route) => `#${pathOf(route)}`;

/** `replace` for steps nobody wants to walk back through (pulse to pulse). */
export function go(route: Route, replace = false): void {
  if (replace) {
    history.replaceState(null, "", hrefOf(route));
    window.dispatchEvent(new HashChangeEvent("hashchange"));
  } else location.hash = hrefOf(route);
}

const subscribe = (changed: () => void) => {
  window.addEventListener("hashchange", changed);
  return () => window.removeEventListener("hashchange", changed);
};

export const useRoutePath = () => useSyncExternalStore(subscribe, () => location.hash.slice(1) || "/");
