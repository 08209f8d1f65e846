import { createHash, timingSafeEqual } from "node:crypto";
import type { IncomingMessage } from "node:http";

/** Why a request is refused: HTTP status, stable code, text for people. */
export interface Refusal {
  status: number;
  code: string;
  text: string;
}

/**
 * Host must be this very server by address or by localhost: a page of another name that was pointed
 * at 127.0.0.1 (DNS rebinding) is refused before anything is served to it.
 */
export function refuseHost(request: IncomingMessage, port: number): Refusal | null {
  const host = request.headers.host ?? "";
  if (host === `127.0.0.1:${port}` || host === `localhost:${port}`) return null;
  return { status: 403, code: "wrong-host", text: "this server answers 127.0.0.1 only" };
}

/** Calls and events: the page's own origin, which a browser always sends with them, and the token. */
export function refuseCaller(
  request: IncomingMessage,
  port: number,
  token: string,
  shown: string | undefined,
): Refusal | null {
  const origin = request.headers.origin;
  if (origin !== `http://127.0.0.1:${port}` && origin !== `http://localhost:${port}`)
    return { status: 403, code: "wrong-origin", text: "only Ringbook's own page may call" };
  if (shown === undefined || !sameText(shown, token))
    return {
      status: 401,
      code: "stale-token",
      text: "this page belongs to an earlier start of Ringbook. Open the address that it printed last",
    };
  return null;
}

/** Compares in a time that does not depend on where the two differ. */
function sameText(a: string, b: string): boolean {
  return timingSafeEqual(digest(a), digest(b));
}

const digest = (text: string) => createHash("sha256").update(text).digest();
