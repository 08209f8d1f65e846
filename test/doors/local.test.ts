import { join } from "node:path";
import { afterAll, beforeAll, describe } from "vitest";
import { WebSocket } from "ws";
import type { Bench, BenchEvent } from "../../app/bridge.ts";
import { openLocalDoor, type LocalDoor } from "../../app/local/door.ts";
import { keepsTheContract } from "./contract.ts";
import { temporaryHost } from "./host.ts";

let place: Awaited<ReturnType<typeof temporaryHost>>;
let door: LocalDoor;
let bench: Bench;
const sockets: WebSocket[] = [];

beforeAll(async () => {
  place = await temporaryHost();
  door = await openLocalDoor(place.host, { page: join(import.meta.dirname, "../../dist/renderer") });
  bench = clientOf(door);
});
afterAll(async () => {
  for (const socket of sockets) socket.close();
  await door.close();
  await place.end();
});

/** What the page does in a browser, said with Node's own means. */
function clientOf({ port, token }: LocalDoor): Bench {
  const origin = `http://127.0.0.1:${port}`;
  const headers = { origin, "x-ringbook-token": token };
  return {
    async call(name, argument) {
      const file = name === "addFile" ? (argument as { name: string; bytes: Uint8Array<ArrayBuffer> }) : null;
      const bytes = file?.bytes instanceof Uint8Array ? file : null;
      const response = await fetch(
        bytes ? `${origin}/file?name=${encodeURIComponent(bytes.name)}` : `${origin}/call/${name}`,
        { method: "POST", headers, body: bytes ? bytes.bytes : JSON.stringify(argument) },
      );
      const reply = (await response.json()) as { answer: never; error?: { text: string } };
      if (reply.error) throw new Error(reply.error.text);
      return reply.answer;
    },
    subscribe(listener) {
      const socket = new WebSocket(`ws://127.0.0.1:${port}/events`, ["ringbook", token], { origin });
      sockets.push(socket);
      socket.on("message", (text) => listener(JSON.parse(String(text)) as BenchEvent));
      return () => socket.close();
    },
  };
}

describe("the local door", () => keepsTheContract(() => bench));
