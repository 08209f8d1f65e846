import type { IncomingMessage, Server } from "node:http";
import type { Duplex } from "node:stream";
import { WebSocketServer } from "ws";
import type { Host } from "../host/host.ts";
import type { Refusal } from "./guard.ts";

/** Events by WebSocket at /events; the caller shows its token as the second subprotocol. */
export function serveEvents(
  server: Server,
  host: Host,
  refuseUpgrade: (request: IncomingMessage, shown: string | undefined) => Refusal | null,
): { close(): void } {
  const sockets = new WebSocketServer({
    noServer: true,
    maxPayload: 1024,
    // Named protocol only: the token is not sent back.
    handleProtocols: () => "ringbook",
  });

  server.on("upgrade", (request: IncomingMessage, socket: Duplex, head: Buffer) => {
    socket.on("error", () => socket.destroy());
    const [name, shown] = (request.headers["sec-websocket-protocol"] ?? "")
      .split(",")
      .map((part) => part.trim());
    const refusal =
      request.url === "/events" && name === "ringbook"
        ? refuseUpgrade(request, shown)
        : { status: 404, code: "not-found", text: "there are no events at this address" };
    if (refusal) return refuseSocket(socket, refusal);
    sockets.handleUpgrade(request, socket, head, (webSocket) => {
      const unsubscribe = host.subscribe((event) => webSocket.send(JSON.stringify(event)));
      webSocket.on("close", unsubscribe);
      webSocket.on("error", () => webSocket.terminate());
    });
  });

  return {
    close() {
      for (const client of sockets.clients) client.terminate();
      sockets.close();
    },
  };
}

function refuseSocket(socket: Duplex, { status, code, text }: Refusal) {
  const body = JSON.stringify({ error: { code, text } });
  socket.end(
    `HTTP/1.1 ${status} Refused\r\ncontent-type: application/json\r\nconnection: close\r\ncontent-length: ${Buffer.byteLength(body)}\r\n\r\n${body}`,
  );
}
