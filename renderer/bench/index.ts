/** One Bench for the page, whatever door it stands behind. */
import type { Bench } from "../../app/bridge.ts";
import type { DesktopBench } from "./desktop.ts";
import { localBench } from "./local.ts";

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
  const shell: DesktopBench | undefined = window.ringbook;
  if (shell) return shell;
  const token = takeToken();
  return token ? localBench(token) : null;
}
