import { randomBytes } from "node:crypto";
import { createServer, type IncomingMessage, type ServerResponse } from "node:http";
import type { AddressInfo } from "node:net";
import { describeFailure } from "../host/failure.ts";
import type { Reply } from "../host/call.ts";
import type { Host } from "../host/host.ts";
import { readBody } from "./body.ts";
import { serveEvents } from "./events.ts";
import { refuseCaller, refuseHost, type Refusal } from "./guard.ts";
import { pagePolicy, readPageFile } from "./static.ts";

export interface LocalDoor {
  port: number;
  token: string;
  /** The page with its token in the fragment, which no browser sends to a server. */
  address: string;
  close(): Promise<void>;
}

export interface LocalOptions {
  /** The built page. */
  page: string;
  /** 0 or nothing: any free port. */
  port?: number;
  /** Largest file that may be sent, bytes. */
  uploadLimit?: number;
}

const largestCall = 4_000_000;

/** Serves the page, the calls and the events on 127.0.0.1 only, with a token of this start. */
export async function openLocalDoor(host: Host, options: LocalOptions): Promise<LocalDoor> {
  const token = randomBytes(32).toString("base64url");
  const uploadLimit = options.uploadLimit ?? 1_500_000_000;
  let port = 0;

  async function call(request: IncomingMessage, url: URL): Promise<Reply> {
    if (url.pathname === "/file") {
      const bytes = await readBody(request, uploadLimit);
      return host.answer("addFile", { name: url.searchParams.get("name"), bytes });
    }
    const body = new TextDecoder().decode(await readBody(request, largestCall));
    return host.answer(url.pathname.slice("/call/".length), JSON.parse(body || "{}"));
  }

  async function serve(request: IncomingMessage, response: ServerResponse) {
    const url = new URL(request.url ?? "/", "http://127.0.0.1");
    const strangeHost = refuseHost(request, port);
    if (strangeHost) return refuse(response, strangeHost);
    if (request.method === "GET" || request.method === "HEAD")
      return servePage(response, options.page, url, port);
    if (request.method !== "POST" || !(url.pathname === "/file" || url.pathname.startsWith("/call/")))
      return refuse(response, { status: 404, code: "not-found", text: "there is nothing at this address" });
    const shown = request.headers["x-ringbook-token"];
    const stranger = refuseCaller(request, port, token, Array.isArray(shown) ? shown[0] : shown);
    if (stranger) return refuse(response, stranger);
    const reply = await call(request, url);
    sendJson(response, "error" in reply ? statusOf(reply.error.code) : 200, reply);
  }

  const server = createServer((request, response) => {
    serve(request, response).catch((error) => {
      const failure = error instanceof SyntaxError ? notJson : describeFailure(error);
      refuse(response, { status: statusOf(failure.code), ...failure });
    });
  });
  const events = serveEvents(
    server,
    host,
    (request, shown) => refuseHost(request, port) ?? refuseCaller(request, port, token, shown),
  );
  await new Promise<void>((resolve, reject) => {
    server.once("error", reject);
    server.listen(options.port ?? 0, "127.0.0.1", resolve);
  });
  port = (server.address() as AddressInfo).port;

  return {
    port,
    token,
    address: `http://127.0.0.1:${port}/#token=${token}`,
    async close() {
      events.close();
      server.closeAllConnections();
      await new Promise((resolve) => server.close(resolve));
    },
  };
}

const notJson = { code: "wrong-argument", text: "the body of the call is not JSON" };

const statuses: Record<string, number> = { "unknown-command": 404, "too-large": 413, "not-found": 404 };
const statusOf = (code: string) => statuses[code] ?? 400;

async function servePage(response: ServerResponse, folder: string, url: URL, port: number) {
  if (url.pathname === "/favicon.ico") return response.writeHead(204).end();
  const file = await readPageFile(folder, url.pathname);
  if (!file) return refuse(response, { status: 404, code: "not-found", text: "there is no such page" });
  const hashed = url.pathname.startsWith("/assets/");
  response.writeHead(200, {
    ...commonHeaders,
    "content-type": file.mime,
    "content-length": file.bytes.length,
    "cache-control": hashed ? "private, max-age=31536000, immutable" : "no-store",
    "content-security-policy": pagePolicy([`ws://127.0.0.1:${port}`, `ws://localhost:${port}`]),
  });
  response.end(response.req.method === "HEAD" ? undefined : file.bytes);
}

const commonHeaders = {
  "x-content-type-options": "nosniff",
  "referrer-policy": "no-referrer",
  "cross-origin-opener-policy": "same-origin",
  "cross-origin-resource-policy": "same-origin",
};

function refuse(response: ServerResponse, { status, code, text }: Refusal) {
  // The rest of a refused upload is not wanted: say so instead of reading it to its end.
  if (!response.req.complete) response.setHeader("connection", "close");
  sendJson(response, status, { error: { code, text } });
}

function sendJson(response: ServerResponse, status: number, reply: Reply) {
  if (response.headersSent) return response.destroy();
  const text = JSON.stringify(reply);
  response.writeHead(status, {
    ...commonHeaders,
    "content-type": "application/json",
    "cache-control": "no-store",
  });
  response.end(text);
}
