import { protocol, type Session } from "electron";
import { pagePolicy, readPageFile } from "../local/static.ts";
import { pageOrigin } from "./guard.ts";

/** Must be told before the app is ready: the page's scheme is a secure origin like https. */
export function registerPageScheme(): void {
  protocol.registerSchemesAsPrivileged([
    { scheme: "ringbook", privileges: { standard: true, secure: true, supportFetchAPI: true } },
  ]);
}

/** Serves the built page's files, nothing outside their folder and nothing by another host name. */
export function servePage(session: Session, folder: string): void {
  session.protocol.handle("ringbook", async (request) => {
    const url = new URL(request.url);
    const file =
      request.method === "GET" && `${url.protocol}//${url.host}` === pageOrigin
        ? await readPageFile(folder, url.pathname)
        : null;
    if (!file) return new Response(null, { status: url.pathname === "/favicon.ico" ? 204 : 404 });
    return new Response(new Uint8Array(file.bytes), {
      headers: {
        "content-type": file.mime,
        "content-security-policy": pagePolicy([]),
        "x-content-type-options": "nosniff",
      },
    });
  });
}
