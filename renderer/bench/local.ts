/** The local door: calls over HTTP, events over a WebSocket, both with this start's token. */
import type { Answer, Argument, Bench, BenchEvent, CommandName } from "../../app/bridge.ts";

const tokenHeader = "x-ringbook-token";
const retry_ms = 1500;

export function localBench(token: string): Bench {
  const listeners = new Set<(event: BenchEvent) => void>();
  let socket: WebSocket | null = null;

  const listen = (reopened: boolean) => {
    const address = new URL("events", location.href);
    address.protocol = "ws:";
    address.hash = "";
    socket = new WebSocket(address, ["ringbook", token]);
    // What was missed while the line was down is read anew.
    socket.addEventListener("open", () => {
      if (reopened) for (const listener of listeners) listener({ type: "book-changed" });
    });
    socket.addEventListener("message", (message) => {
      const event = JSON.parse(String(message.data)) as BenchEvent;
      for (const listener of listeners) listener(event);
    });
    socket.addEventListener("close", () => {
      if (listeners.size > 0) setTimeout(() => listen(true), retry_ms);
    });
  };

  return {
    call: (name, argument) => callOverHttp(token, name, argument),
    subscribe(listener) {
      listeners.add(listener);
      if (!socket || socket.readyState > WebSocket.OPEN) listen(false);
      return () => {
        listeners.delete(listener);
      };
    },
  };
}

async function callOverHttp<Name extends CommandName>(token: string, name: Name, argument: Argument<Name>) {
  const isFile = name === "addFile";
  const file = argument as Argument<"addFile">;
  const address = isFile ? `file?name=${encodeURIComponent(file.name)}` : `call/${name}`;
  const body = isFile ? (file.bytes as Uint8Array<ArrayBuffer>) : JSON.stringify(argument);
  const type = isFile ? "application/octet-stream" : "application/json";
  let response: Response;
  try {
    response = await fetch(address, {
      method: "POST",
      headers: { [tokenHeader]: token, "content-type": type },
      body,
    });
  } catch {
    throw new Error("Ringbook's own program no longer answers. Start it again, then reload this page.");
  }
  return unwrap<Answer<Name>>(response);
}

async function unwrap<T>(response: Response): Promise<T> {
  const reply = (await response.json().catch(() => null)) as {
    answer?: T;
    error?: { code: string; text: string };
  } | null;
  if (response.ok && reply && "answer" in reply) return reply.answer as T;
  throw new Error(reply?.error?.text ?? `The program answered with status ${response.status}.`);
}
