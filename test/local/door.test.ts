import { mkdtempSync, mkdirSync, rmSync, writeFileSync } from "node:fs";
import { request as httpRequest } from "node:http";
import { connect } from "node:net";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { WebSocket } from "ws";
import { commands, type BenchEvent } from "../../app/bridge.ts";
import type { Host } from "../../app/host/host.ts";
import { openLocalDoor, type LocalDoor } from "../../app/local/door.ts";

/** A host that answers what it was asked: this file is about the door, not about what is behind it. */
function echoHost() {
  const asked: { name: unknown; argument: unknown }[] = [];
  const listeners = new Set<(event: BenchEvent) => void>();
  const host: Host = {
    async answer(name, argument) {
      asked.push({ name, argument });
      return name === "missing" ? { error: { code: "unknown-command", text: "no" } } : { answer: { name } };
    },
    subscribe(listener) {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
    idle: async () => {},
    close: async () => {},
  };
  return {
    host,
    asked,
    emit: (event: BenchEvent) => listeners.forEach((listener) => listener(event)),
    listeners,
  };
}

let folder: string;
let door: LocalDoor;
let echo: ReturnType<typeof echoHost>;

beforeEach(async () => {
  folder = mkdtempSync(join(tmpdir(), "door-"));
  mkdirSync(join(folder, "page", "assets"), { recursive: true });
  writeFileSync(join(folder, "page", "index.html"), "<!doctype html><title>Ringbook</title>");
  writeFileSync(join(folder, "page", "assets", "main.js"), "export {};");
  writeFileSync(join(folder, "secret.txt"), "not for the page");
  echo = echoHost();
  door = await openLocalDoor(echo.host, { page: join(folder, "page"), uploadLimit: 1000 });
});
afterEach(async () => {
  await door.close();
  rmSync(folder, { recursive: true });
});

interface Sent {
  method?: string;
  path?: string;
  headers?: Record<string, string>;
  body?: string | Buffer;
}

/** node:http instead of fetch: it lets a test say any Host and any path. */
function send({ method = "GET", path = "/", headers = {}, body }: Sent) {
  return new Promise<{ status: number; headers: Record<string, unknown>; text: string }>(
    (resolve, reject) => {
      const options = { host: "127.0.0.1", port: door.port, method, path, headers };
      const request = httpRequest(options, (response) => {
        let text = "";
        response.on("data", (part) => (text += part));
        response.on("end", () =>
          resolve({ status: response.statusCode ?? 0, headers: response.headers, text }),
        );
      });
      request.on("error", reject);
      request.end(body);
    },
  );
}

const own = () => ({ origin: `http://127.0.0.1:${door.port}`, "x-ringbook-token": door.token });
const call = (headers: Record<string, string>) =>
  send({ method: "POST", path: "/call/hello", headers, body: "{}" });
const codeOf = (text: string) => JSON.parse(text).error.code;

describe("calls", () => {
  it("are answered for the own page with its token", async () => {
    const { status, text } = await call(own());
    expect([status, JSON.parse(text)]).toEqual([200, { answer: { name: "hello" } }]);
    expect(echo.asked).toEqual([{ name: "hello", argument: {} }]);
  });

  it("are refused without an Origin", async () => {
    const { status, text } = await call({ "x-ringbook-token": door.token });
    expect([status, codeOf(text)]).toEqual([403, "wrong-origin"]);
  });

  it.each(["http://example.org", "null", "https://127.0.0.1", "http://127.0.0.1:1"])(
    "are refused from the origin %s",
    async (origin) => {
      const { status, text } = await call({ ...own(), origin });
      expect([status, codeOf(text)]).toEqual([403, "wrong-origin"]);
    },
  );

  it.each(["", "x", "A".repeat(43)])("are refused with the token %j of another start", async (token) => {
    const { status, text } = await call({ ...own(), "x-ringbook-token": token });
    expect([status, codeOf(text)]).toEqual([401, "stale-token"]);
  });

  it("are refused without a token", async () => {
    const { status, text } = await call({ origin: own().origin });
    expect([status, codeOf(text)]).toEqual([401, "stale-token"]);
  });

  it.each(["ringbook.example", "127.0.0.1", "localhost:1", "127.0.0.1.example.org"])(
    "are refused for the host %s",
    async (host) => {
      const { status, text } = await call({ ...own(), host });
      expect([status, codeOf(text)]).toEqual([403, "wrong-host"]);
    },
  );

  it("answer a body that is not JSON with an error, as JSON", async () => {
    const { status, headers, text } = await send({
      method: "POST",
      path: "/call/hello",
      headers: own(),
      body: "{",
    });
    expect([status, codeOf(text), headers["content-type"]]).toEqual([
      400,
      "wrong-argument",
      "application/json",
    ]);
  });

  it.each([...Object.keys(commands).map((name) => `/call/${name}`), "/file?name=a.csv"])(
    "to %s are refused with a stale token, a foreign or no Origin, and to a foreign Host",
    async (path) => {
      const refused: [Record<string, string>, number, string][] = [
        [{ ...own(), "x-ringbook-token": "A".repeat(43) }, 401, "stale-token"],
        [{ ...own(), origin: "http://example.org" }, 403, "wrong-origin"],
        [{ "x-ringbook-token": door.token }, 403, "wrong-origin"],
        [{ ...own(), host: "ringbook.example" }, 403, "wrong-host"],
      ];
      for (const [headers, wanted, code] of refused) {
        const { status, text } = await send({ method: "POST", path, headers, body: "{}" });
        expect([status, codeOf(text)]).toEqual([wanted, code]);
      }
      expect(echo.asked).toEqual([]);
    },
  );

  it("never reached the host when they were refused", async () => {
    await call({ "x-ringbook-token": door.token });
    await call({ ...own(), host: "example.org" });
    await call({ ...own(), "x-ringbook-token": "x" });
    expect(echo.asked).toEqual([]);
  });

  it("allow no other origin by CORS, not even in a preflight", async () => {
    const headers = { origin: "http://example.org", "access-control-request-method": "POST" };
    const preflight = await send({ method: "OPTIONS", path: "/call/hello", headers });
    expect(preflight.status).toBe(404);
    const names = [...Object.keys(preflight.headers), ...Object.keys((await call(own())).headers)];
    expect(names.filter((name) => name.startsWith("access-control"))).toEqual([]);
  });

  it("hand an unknown command's refusal on as 404", async () => {
    expect((await send({ method: "POST", path: "/call/missing", headers: own(), body: "{}" })).status).toBe(
      404,
    );
  });
});

describe("files", () => {
  it("arrive byte for byte with their name", async () => {
    const body = Buffer.from([0, 255, 10, 13, 128]);
    const path = `/file?name=${encodeURIComponent("run 7/pulse ä.csv")}`;
    expect((await send({ method: "POST", path, headers: own(), body })).status).toBe(200);
    expect(echo.asked).toEqual([
      { name: "addFile", argument: { name: "run 7/pulse ä.csv", bytes: new Uint8Array(body) } },
    ]);
  });

  it("above the limit are refused, told beforehand or not", async () => {
    const body = Buffer.alloc(1001);
    const told = await send({ method: "POST", path: "/file?name=a.csv", headers: own(), body });
    expect([told.status, codeOf(told.text)]).toEqual([413, "too-large"]);
    const headers = { ...own(), "transfer-encoding": "chunked" };
    const untold = await send({ method: "POST", path: "/file?name=a.csv", headers, body });
    expect([untold.status, codeOf(untold.text)]).toEqual([413, "too-large"]);
    expect(echo.asked).toEqual([]);
  });
});

describe("the page", () => {
  it("comes with a policy that lets nothing foreign in", async () => {
    const { status, headers } = await send({});
    expect(status).toBe(200);
    const policy = String(headers["content-security-policy"]);
    expect(policy).toContain("default-src 'self'; script-src 'self';");
    expect(policy).not.toMatch(/unsafe-eval|script-src[^;]*unsafe-inline|\*/);
    expect(headers["x-content-type-options"]).toBe("nosniff");
  });

  it("has no icon of its own and says so in peace", async () => {
    expect((await send({ path: "/favicon.ico" })).status).toBe(204);
  });

  it.each([
    "/../secret.txt",
    "/%2e%2e/secret.txt",
    "/..%2fsecret.txt",
    "/assets/..%2f..%2fsecret.txt",
    "/%00.txt",
  ])("serves nothing outside its folder: %s", async (path) => {
    const { status, text } = await send({ path });
    expect([status, codeOf(text)]).toEqual([404, "not-found"]);
  });

  it("is not served to another host name", async () => {
    expect((await send({ headers: { host: "ringbook.example" } })).status).toBe(403);
  });

  it("is not told the token by the server", async () => {
    expect((await send({})).text).not.toContain(door.token);
  });
});

const openEvents = (protocols: string[], origin?: string, path = "/events") =>
  new Promise<WebSocket>((resolve, reject) => {
    const socket = new WebSocket(`ws://127.0.0.1:${door.port}${path}`, protocols, { origin });
    socket.once("open", () => resolve(socket));
    socket.once("error", reject);
  });

describe("events", () => {
  it("reach a page with the token, and the token is not sent back", async () => {
    const socket = await openEvents(["ringbook", door.token], own().origin);
    const message = new Promise((resolve) =>
      socket.once("message", (data) => resolve(JSON.parse(String(data)))),
    );
    echo.emit({ type: "book-changed" });
    expect(await message).toEqual({ type: "book-changed" });
    expect(socket.protocol).toBe("ringbook");
    socket.close();
  });

  it("end when the page is gone", async () => {
    const socket = await openEvents(["ringbook", door.token], own().origin);
    socket.terminate();
    await expect.poll(() => echo.listeners.size).toBe(0);
  });

  it("are refused without Origin, with a foreign one, without token and elsewhere", async () => {
    const good = own().origin;
    await expect(openEvents(["ringbook", door.token])).rejects.toThrow("403");
    await expect(openEvents(["ringbook", door.token], "http://example.org")).rejects.toThrow("403");
    await expect(openEvents(["ringbook"], good)).rejects.toThrow("401");
    await expect(openEvents(["ringbook", "x"], good)).rejects.toThrow("401");
    await expect(openEvents(["ringbook", door.token], good, "/elsewhere")).rejects.toThrow("404");
  });
});

describe("the server", () => {
  it("listens on the loopback address alone", async () => {
    const elsewhere = connect({ host: "127.0.0.2", port: door.port });
    const outcome = await new Promise((resolve) => {
      elsewhere.once("connect", () => resolve("connected"));
      elsewhere.once("error", (error: NodeJS.ErrnoException) => resolve(error.code));
    });
    elsewhere.destroy();
    expect(outcome).toBe("ECONNREFUSED");
  });

  it("makes a new token of 256 bits at every start", async () => {
    const other = await openLocalDoor(echo.host, { page: join(folder, "page") });
    expect(Buffer.from(other.token, "base64url")).toHaveLength(32);
    expect(other.token).not.toBe(door.token);
    await other.close();
  });
});
