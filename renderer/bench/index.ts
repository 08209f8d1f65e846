/** One Bench for the page, whatever door it stands behind. */
import type { Bench } from "../../app/bridge.ts";
import { localBench } from "./local.ts";

/** What the desktop door adds: the path of a dropped file. */
export interface DesktopBench extends Bench {
  pathOf(file: File): string;
}

declare global {
  interface Window {
    ringbook?: DesktopBench;
  }
}

const tokenKey = "ringbook-token";

/** The token comes once in the address and is then kept for this tab only, out of sight. */
function takeToken(): string | null {
  const inAddress = /^#token=([\w-]+)/.exec(location.hash)?.[1];
  if (inAddress) {
    sessionStorage.setItem(tokenKey, inAddress);
    history.replaceState(null, "", location.pathname + location.search);
  }
  return sessionStorage.getItem(tokenKey);
}

/** null: the page was opened without the address the program printed. */
export function findBench(): Bench | null {
  if (window.ringbook) return window.ringbook;
  const token = takeToken();
  return token ? localBench(token) : null;
}
